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

  it('stops within a part', () => {
    expect(dutyCourse(year, 1)).toHaveLength(1);
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
