import { describe, expect, it } from 'vitest';
import { dutyCourse, lastLoadSegment } from '../../src/duty/course.js';
import type { Duty, DutyPart } from '../../src/study/study.js';
import { segmentOf } from '../reference/duties.js';

const FACTOR = { nominal: 1, relative: true, bank: { law: 'fixed' } } as const;
const duty = (...parts: DutyPart[]): Duty => ({
  kind: 'profile',
  cycleS: 86_400,
  parts,
  loadFactor: FACTOR,
  chargeFactor: FACTOR,
});

describe('dutyCourse', () => {
  const sunny = [segmentOf(24, { chargeW: 500 })];
  const dull = [segmentOf(24, { loadW: 50 })];
  const dark = [segmentOf(12), segmentOf(12, { loadA: 2 })];
  const year = duty(
    { name: 'summer', repeat: 2, cycles: [sunny, dull] },
    { name: 'winter', repeat: 1, cycles: [dark] },
  );

  it('repeats each part, then the whole, up to the horizon', () => {
    expect(dutyCourse(year, 7).map(({ part, segments }) => [part, segments])).toEqual([
      ['summer', sunny],
      ['summer', dull],
      ['summer', sunny],
      ['summer', dull],
      ['winter', dark],
      ['summer', sunny],
      ['summer', dull],
    ]);
  });

  it('goes on from the start after a year of parts', () => {
    // By hand: 26 weeks of summer are cycles 1 to 182, 8 dark weeks 183 to 238; 239 is the first of the next summer.
    const week = (load: number) => Array.from({ length: 7 }, (_, day) => [segmentOf(24, { loadW: load + day })]);
    const parts = duty(
      { name: 'summer', repeat: 26, cycles: week(100) },
      { name: 'dark', repeat: 8, cycles: week(500) },
    );
    const course = dutyCourse(parts, 365);
    const at = (cycle: number) => [course[cycle - 1]?.part, course[cycle - 1]?.segments[0]?.loadW];
    expect([1, 182, 183, 238, 239, 365].map(at)).toEqual([
      ['summer', 100],
      ['summer', 106],
      ['dark', 500],
      ['dark', 506],
      ['summer', 100],
      // 365 = 238 + 127, and 127 = 18 x 7 + 1.
      ['summer', 100],
    ]);
    expect(course.filter(({ part }) => part === 'dark')).toHaveLength(56);
  });

  it('stops within a part', () => {
    expect(dutyCourse(year, 1)).toHaveLength(1);
  });

  it('unrolls no repeats beyond the horizon', () => {
    // The largest duty that a study may state, of a profile of four years: 1.46e9 cycles, more than a machine could hold.
    const years = Array.from({ length: 1461 }, () => sunny);
    const parts = Array.from({ length: 100 }, (_, n): DutyPart => ({ name: `${n}`, repeat: 10_000, cycles: years }));
    const course = dutyCourse(duty(...parts), 36_500);
    expect(course).toHaveLength(36_500);
    expect(course[1461]).toBe(course[0]);
    expect(course.at(-1)).toEqual({ part: '0', segments: sunny });
    expect(dutyCourse(duty({ name: 'first', repeat: 1, cycles: years }, ...parts), 1462).at(-1)?.part).toBe('0');
  });

  it('holds every cycle of the study once', () => {
    const course = dutyCourse(year, 100);
    expect(new Set(course).size).toBe(3);
  });
});

describe('lastLoadSegment', () => {
  it('finds the last segment with a demand in watts or amperes', () => {
    const at = (...segments: ReturnType<typeof segmentOf>[]): number => lastLoadSegment({ part: 'p', segments });
    expect(at(segmentOf(1, { loadW: 5 }), segmentOf(1, { loadA: 1 }), segmentOf(1, { chargeW: 9 }))).toBe(1);
    expect(at(segmentOf(1, { loadW: 5 }), segmentOf(1))).toBe(0);
    expect(at(segmentOf(1, { chargeW: 5 }))).toBe(-1);
  });
});
