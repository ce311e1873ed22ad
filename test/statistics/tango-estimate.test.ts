import { describe, expect, test } from 'vitest';
import { tangoEstimate } from '../../src/statistics/tango-estimate.js';
import { allTables, probabilityThat } from './multinomial.js';
import { PAIRED_TABLES } from './paired-tables.js';

function tango(both: number, onlyFirst: number, onlySecond: number, neither: number, confidence = 0.95) {
  return tangoEstimate({ both, onlyFirst, onlySecond, neither }, confidence);
}

describe("Tango's interval", () => {
  test.each(PAIRED_TABLES)('of $counts has the published ends $tango', ({ counts: [e, f, g, h], d, tango: ends }) => {
    const { estimate, lower, upper, method, instances } = tango(e, f, g, h);
    expect(Math.abs((estimate ?? 9) - d)).toBeLessThan(5.1e-7);
    expect(Math.abs((lower ?? 9) - ends[0])).toBeLessThan(5.1e-7);
    expect(Math.abs((upper ?? 9) - ends[1])).toBeLessThan(5.1e-7);
    expect([method, instances]).toEqual(['tango', e + f + g + h]);
  });

  test('turns its sign when the candidates change places', () => {
    const one = tango(59, 6, 16, 80);
    const other = tango(59, 16, 6, 80);
    expect(other.lower).toBe(-(one.upper ?? 9));
    expect(other.upper).toBe(-(one.lower ?? 9));
  });

  test('does not depend on how the pairs that agree are shared out', () => {
    expect(tango(0, 5, 9, 40)).toEqual(tango(40, 5, 9, 0));
  });

  test('has a width where all pairs agree, and ends within -1 and 1 where all differ', () => {
    // By hand, no discordant pair: q = 0, so n D^2 = z^2 D (1 - D) and D = z^2 / (n + z^2), with z = 1.959964.
    const alike = tango(3, 0, 0, 37);
    expect(alike.upper).toBeCloseTo(3.841459 / 43.841459, 8);
    expect(alike.lower).toBe(-(alike.upper ?? 9));
    const unlike = tango(0, 12, 0, 0);
    expect([unlike.estimate, unlike.upper]).toEqual([1, 1]);
    expect(unlike.lower).toBeGreaterThan(0.5);
  });

  test('covers about what it says, over every possible table', () => {
    // The score interval's coverage is near its confidence at 30 pairs; Tango's own table 3 has 0.94 to 0.97.
    for (const shares of [
      [0.3, 0.15, 0.1, 0.45],
      [0.6, 0.1, 0.1, 0.2],
    ] as const) {
      const truth = shares[1] - shares[2];
      const covered = probabilityThat(allTables(30, shares), ([e = 0, f = 0, g = 0, h = 0]) => {
        const { lower, upper } = tango(e, f, g, h);
        return lower !== null && upper !== null && lower <= truth && truth <= upper;
      });
      expect(covered).toBeGreaterThan(0.94);
      expect(covered).toBeLessThan(0.97);
    }
  });

  test('is not estimable from no instances and refuses counts that are none', () => {
    expect(tango(0, 0, 0, 0)).toMatchObject({ estimate: null, note: 'not estimable from 0' });
    expect(() => tango(1, -1, 0, 5)).toThrow(RangeError);
    expect(() => tango(1, 0.5, 0, 5)).toThrow(RangeError);
    expect(() => tango(1, 1, 0, 5, 95)).toThrow(RangeError);
  });
});
