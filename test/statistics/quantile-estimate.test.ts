import { describe, expect, test } from 'vitest';
import { binomialCdf } from '../../src/mathematics/binomial.js';
import { quantileEstimate, quantileRanks } from '../../src/statistics/quantile-estimate.js';
import { quantilePlace } from '../../src/statistics/quantile-place.js';
import { allTables, probabilityThat } from './multinomial.js';

const oneTo = (n: number): Float64Array => Float64Array.from({ length: n }, (_, index) => index + 1);

describe('place of a quantile', () => {
  test('is that of R and NumPy by default', () => {
    // By hand, definition 7: (4 - 1) 0.4 = 1.2 above the first value; 3 x 1 above it; 0 of one value.
    expect(quantilePlace(4, 0.4)).toEqual({ below: 2, above: 3, part: expect.closeTo(0.2, 14) });
    expect(quantilePlace(4, 0)).toEqual({ below: 1, above: 1, part: 0 });
    expect(quantilePlace(4, 1)).toEqual({ below: 4, above: 4, part: 0 });
    expect(quantilePlace(1, 0.3)).toEqual({ below: 1, above: 1, part: 0 });
  });

  test('is refused for no values and no probability', () => {
    expect(() => quantilePlace(0, 0.5)).toThrow(RangeError);
    for (const p of [-0.1, 1.1, Number.NaN]) expect(() => quantilePlace(3, p)).toThrow(RangeError);
  });
});

describe('ranks', () => {
  // Binomial ranks and their coverage, from a general statistics library and again in exact fractions; the last row by
  // hand for six coins: all six on one side has probability 1/64 < 2.5 %, and 1 - 2/64 is covered.
  test.each([
    { n: 10, p: 0.5, lower: 2, upper: 9, coverage: 0.978516 },
    { n: 100, p: 0.9, lower: 84, upper: 96, coverage: 0.95569 },
    { n: 1000, p: 0.95, lower: 936, upper: 964, coverage: 0.958095 },
    { n: 10_000, p: 0.999, lower: 9983, upper: 9997, coverage: 0.97545746 },
    { n: 6, p: 0.5, lower: 1, upper: 6, coverage: 0.96875 },
  ])('of $n values for p = $p are $lower and $upper', ({ n, p, lower, upper, coverage }) => {
    expect(quantileRanks(n, p, 0.95)).toEqual({ lower, upper });
    expect(Math.abs(binomialCdf(upper - 1, n, p) - binomialCdf(lower - 1, n, p) - coverage)).toBeLessThan(5.1e-7);
  });

  test('exist for the largest value as upper end from the 95/97.5 sample size of Wilks on', () => {
    // By hand: 0.95^n <= 0.025 from n = ln 0.025 / ln 0.95 = 71.9 on.
    expect(quantileRanks(71, 0.95, 0.95)).toBeNull();
    expect(quantileRanks(72, 0.95, 0.95)?.upper).toBe(72);
    expect(quantileRanks(71, 0.05, 0.95)).toBeNull();
    expect(quantileRanks(72, 0.05, 0.95)?.lower).toBe(1);
  });

  test('of 90 % confidence give the sample sizes of Wilks for one-sided 95/95', () => {
    // Wilks 1941, Ann. Math. Stat. 12, 91: 59, 93, 124, 153, 181 values for the first five orders from the top.
    [59, 93, 124, 153, 181].forEach((n, order) => {
      expect(n + 1 - (quantileRanks(n, 0.95, 0.9)?.upper ?? 0)).toBe(order + 1);
      expect(n - (quantileRanks(n - 1, 0.95, 0.9)?.upper ?? n)).toBe(order);
    });
  });

  test('are refused for what is no quantile or no confidence', () => {
    for (const p of [0, 1, Number.NaN]) expect(() => quantileRanks(50, p, 0.95)).toThrow(RangeError);
    for (const confidence of [0, 1, 95]) expect(() => quantileRanks(50, 0.5, confidence)).toThrow(RangeError);
  });
});

describe('estimate of a quantile', () => {
  test('does not need its values in order, and leaves them as they are', () => {
    // By hand, as below: 2 k mod 101 goes through 1 to 100.
    const values = oneTo(100).map((k) => (2 * k) % 101);
    expect(quantileEstimate(values, 0.9, 0.95)).toMatchObject({ lower: 84, upper: 96 });
    expect([...values.subarray(0, 3)]).toEqual([2, 4, 6]);
  });

  test('takes the values at its ranks, counted from 1, and names them', () => {
    expect(quantileEstimate(oneTo(100), 0.9, 0.95)).toEqual({
      // By hand, definition 7: place 99 x 0.9 = 89.1 above the first value.
      estimate: expect.closeTo(90.1, 10),
      lower: 84,
      upper: 96,
      method: 'order-statistics',
      note: 'ranks 84 and 96',
      instances: 100,
    });
  });

  test('is not estimable from a sample that does not hold the ranks', () => {
    for (const n of [0, 1, 5]) {
      expect(quantileEstimate(oneTo(n), 0.5, 0.95)).toEqual({
        estimate: null,
        lower: null,
        upper: null,
        method: '',
        note: `not estimable from ${n}`,
        instances: n,
      });
    }
  });

  test('has no width where all values are equal', () => {
    const { estimate, lower, upper } = quantileEstimate(new Float64Array(64).fill(0), 0.5, 0.95);
    expect([estimate, lower, upper]).toEqual([0, 0, 0]);
  });

  test('covers at least its confidence for tied values too, over every possible sample', () => {
    // Values 0, 1, 2 with these shares: the quartile is 0, the median 1, the 85th percentile 2.
    const shares = [0.3, 0.5, 0.2];
    const n = 24;
    const tables = allTables(n, shares);
    for (const [p, truth] of [
      [0.25, 0],
      [0.5, 1],
      [0.85, 2],
    ] as const) {
      const covered = probabilityThat(tables, (counts) => {
        const values = Float64Array.from(counts.flatMap((count, value) => new Array<number>(count).fill(value)));
        const { lower, upper } = quantileEstimate(values, p, 0.9);
        return lower !== null && upper !== null && lower <= truth && truth <= upper;
      });
      expect(covered).toBeGreaterThanOrEqual(0.9);
    }
  });
});
