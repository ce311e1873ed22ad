import { describe, expect, test } from 'vitest';
import { clopperPearson, proportionEstimate, wilson } from '../../src/statistics/proportion-estimate.js';
import { allTables, probabilityThat } from './multinomial.js';

// Newcombe 1998, Stat. Med. 17, 857-872, the four examples; six digits from a general statistics library.
const NEWCOMBE = [
  { events: 81, n: 263, wilson: [0.255289, 0.36621], exact: [0.252737, 0.367622] },
  { events: 15, n: 148, wilson: [0.062386, 0.160487], exact: [0.057844, 0.16165] },
  { events: 0, n: 20, wilson: [0, 0.161125], exact: [0, 0.168433] },
  { events: 1, n: 29, wilson: [0.006113, 0.171755], exact: [0.000873, 0.177644] },
] as const;

// The same library, for rare events.
const RARE = [
  { events: 3, n: 1000, wilson: [0.001021, 0.008783], exact: [0.000619, 0.008742] },
  { events: 5, n: 10_000, wilson: [0.000214, 0.00117], exact: [0.000162, 0.001166] },
  { events: 0, n: 1000, wilson: [0, 0.003827], exact: [0, 0.003682] },
] as const;

describe('intervals of one proportion', () => {
  test.each([...NEWCOMBE, ...RARE])('$events of $n has the published ends', ({ events, n, ...expected }) => {
    const score = wilson(events, n, 0.95);
    expect(Math.abs(score.lower - expected.wilson[0])).toBeLessThan(5.1e-7);
    expect(Math.abs(score.upper - expected.wilson[1])).toBeLessThan(5.1e-7);
    const exact = clopperPearson(events, n, 0.95);
    expect(Math.abs(exact.lower - expected.exact[0])).toBeLessThan(5.1e-7);
    expect(Math.abs(exact.upper - expected.exact[1])).toBeLessThan(5.1e-7);
  });

  test('none seen leaves 3.69 in n possible at most', () => {
    // By hand: (1 - p)^n = 0.025 gives n p -> ln 40 = 3.689 for large n.
    expect(clopperPearson(0, 100_000, 0.95).upper * 100_000).toBeCloseTo(Math.log(40), 3);
  });

  test('events and their absence mirror each other', () => {
    for (const interval of [wilson, clopperPearson]) {
      const seen = interval(7, 40, 0.95);
      const unseen = interval(33, 40, 0.95);
      expect(seen.lower + unseen.upper).toBeCloseTo(1, 6);
      expect(seen.upper + unseen.lower).toBeCloseTo(1, 6);
    }
  });

  test('reach exactly 0 and 1 at the ends, and no instance or a bad count is refused', () => {
    for (const interval of [wilson, clopperPearson]) {
      expect(interval(0, 17, 0.95).lower).toBe(0);
      expect(interval(17, 17, 0.95).upper).toBe(1);
      expect(() => interval(0, 0, 0.95)).toThrow(RangeError);
      expect(() => interval(3, 2, 0.95)).toThrow(RangeError);
      expect(() => interval(1, 2, 1)).toThrow(RangeError);
    }
  });
});

describe('estimate of a proportion', () => {
  test("takes Wilson's interval, but Clopper and Pearson's below five events or five others", () => {
    for (const [events, method] of [
      [0, 'clopper-pearson'],
      [4, 'clopper-pearson'],
      [5, 'wilson'],
      [507, 'wilson'],
      [508, 'clopper-pearson'],
      [512, 'clopper-pearson'],
    ] as const) {
      const estimate = proportionEstimate(events, 512, 0.95);
      const { lower, upper } = (method === 'wilson' ? wilson : clopperPearson)(events, 512, 0.95);
      expect(estimate).toEqual({ estimate: events / 512, lower, upper, method, note: '', instances: 512 });
    }
  });

  test('covers what it says, over every possible count', () => {
    for (const n of [20, 64]) {
      let mean = 0;
      for (let percent = 1; percent <= 99; percent++) {
        const p = percent / 100;
        const tables = allTables(n, [p, 1 - p]);
        const covers = (interval: { lower: number | null; upper: number | null }): boolean =>
          interval.lower !== null && interval.upper !== null && interval.lower <= p && p <= interval.upper;
        // Law of the exact interval: never below its confidence.
        expect(
          probabilityThat(tables, ([x = 0]) => covers(clopperPearson(x, n, 0.95))),
          `p ${p}`,
        ).toBeGreaterThanOrEqual(0.95);
        mean += probabilityThat(tables, ([x = 0]) => covers(proportionEstimate(x, n, 0.95))) / 99;
      }
      // The score interval covers 95 % on average over p, the exact one more.
      expect(mean).toBeGreaterThan(0.945);
      expect(mean).toBeLessThan(0.985);
    }
  });

  test('is not estimable from no instances', () => {
    expect(proportionEstimate(0, 0, 0.95)).toEqual({
      estimate: null,
      lower: null,
      upper: null,
      method: '',
      note: 'not estimable from 0',
      instances: 0,
    });
  });

  test('stands for a single instance', () => {
    // By hand: (1 - p)^1 = 0.025.
    expect(proportionEstimate(0, 1, 0.95).upper).toBeCloseTo(0.975, 6);
    expect(proportionEstimate(1, 1, 0.95).lower).toBeCloseTo(0.025, 6);
  });

  test('refuses counts that are none and a confidence that is none', () => {
    for (const [events, n] of [
      [-1, 5],
      [6, 5],
      [1.5, 5],
      [1, 5.5],
      [Number.NaN, 5],
    ] as const) {
      expect(() => proportionEstimate(events, n, 0.95)).toThrow(RangeError);
    }
    for (const confidence of [0, 1, 95, Number.NaN]) {
      expect(() => proportionEstimate(1, 5, confidence)).toThrow(RangeError);
    }
  });
});
