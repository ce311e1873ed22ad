import seedrandom from 'seedrandom';
import { describe, expect, test } from 'vitest';
import { meanDifferenceOf } from '../../src/statistics/drawn-estimate.js';
import { bonferroniConfidence, holmAdjusted } from '../../src/statistics/holm.js';
import { mcnemarTest } from '../../src/statistics/mcnemar-test.js';
import { meanDifferenceTest } from '../../src/statistics/pair-test.js';
import { allTables, probabilityThat } from './multinomial.js';
import { PAIRED_TABLES } from './paired-tables.js';

describe("McNemar's exact test", () => {
  test.each(PAIRED_TABLES)('of $counts has the published p $exact, mid-p $mid', ({ counts, exact, mid }) => {
    const [both, onlyFirst, onlySecond, neither] = counts;
    const p = mcnemarTest({ both, onlyFirst, onlySecond, neither });
    expect(Math.abs(p.exact / exact - 1)).toBeLessThan(5e-6);
    expect(Math.abs(p.mid / mid - 1)).toBeLessThan(5e-6);
  });

  test('finds nothing where no pair differs or as many either way', () => {
    expect(mcnemarTest({ both: 3, onlyFirst: 0, onlySecond: 0, neither: 9 })).toEqual({ exact: 1, mid: 1 });
    expect(mcnemarTest({ both: 3, onlyFirst: 4, onlySecond: 4, neither: 9 }).exact).toBe(1);
  });

  test('rejects no more often than it says where there is no difference, over every possible table', () => {
    const tables = allTables(24, [0.2, 0.3, 0.3, 0.2]);
    for (const alpha of [0.01, 0.05, 0.2]) {
      const rejected = probabilityThat(tables, ([both = 0, onlyFirst = 0, onlySecond = 0, neither = 0]) => {
        return mcnemarTest({ both, onlyFirst, onlySecond, neither }).exact <= alpha;
      });
      expect(rejected).toBeLessThanOrEqual(alpha);
      expect(rejected).toBeGreaterThan(alpha / 4);
    }
  });
});

describe('test of a mean difference', () => {
  test("is that of Student's own example", () => {
    // Student 1908, Biometrika 6, 1-25; p as printed by R 4 for its data set `sleep`: t = 4.0621, df = 9, p = 0.002833.
    const values = Float64Array.of(1.2, 2.4, 1.3, 1.3, 0, 1, 1.8, 0.8, 4.6, 1.4);
    const { pValue, method } = meanDifferenceTest({ values, blocks: null });
    expect(method).toBe('paired-t');
    expect(pValue).toBeCloseTo(0.002833, 6);
  });

  test('agrees with the interval on whether 0 is left out', () => {
    const draw = seedrandom.tychei('test and interval');
    const blocks = Int32Array.from({ length: 40 }, (_, index) => Math.floor(index / 4));
    for (let repetition = 0; repetition < 300; repetition++) {
      const values = Float64Array.from({ length: 40 }, () => draw.double() - 0.42);
      for (const drawn of [
        { values, blocks: null },
        { values, blocks },
      ]) {
        const { lower, upper } = meanDifferenceOf(drawn, 0.9);
        const leavesOutZero = lower !== null && upper !== null && (lower > 0 || upper < 0);
        expect((meanDifferenceTest(drawn).pValue ?? 9) < 0.1).toBe(leavesOutZero);
      }
    }
  });

  test('says nothing of equal differences, of one, and of few blocks', () => {
    const none = { pValue: null, method: '' };
    expect(meanDifferenceTest({ values: Float64Array.of(2, 2, 2), blocks: null })).toEqual(none);
    expect(meanDifferenceTest({ values: Float64Array.of(2), blocks: null })).toEqual(none);
    expect(meanDifferenceTest({ values: Float64Array.of(2, 3, 4), blocks: Int32Array.of(1, 2, 3) })).toEqual(none);
  });
});

describe('several comparisons at once', () => {
  test('are adjusted as Holm says', () => {
    // By hand: ascending 0.005 0.01 0.03 0.04 times 4 3 2 1 is 0.02 0.03 0.06 0.04, the last raised to 0.06.
    const adjusted = holmAdjusted([0.01, 0.04, 0.03, 0.005]);
    for (const [index, expected] of [0.03, 0.06, 0.06, 0.02].entries()) {
      expect(adjusted[index]).toBeCloseTo(expected, 14);
    }
    expect(holmAdjusted([0.6, 0.7])).toEqual([1, 1]);
    expect(holmAdjusted([0.2])).toEqual([0.2]);
    expect(holmAdjusted([])).toEqual([]);
    expect(() => holmAdjusted([1.5])).toThrow(RangeError);
  });

  test('reject any true hypothesis no more often than they say', () => {
    const draw = seedrandom.tychei('familywise');
    const repetitions = 20_000;
    let wrong = 0;
    for (let repetition = 0; repetition < repetitions; repetition++) {
      // Three true hypotheses with uniform p beside two false ones that are always found.
      const adjusted = holmAdjusted([draw.double(), 1e-6, draw.double(), 1e-6, draw.double()]);
      if ([0, 2, 4].some((index) => adjusted[index] <= 0.05)) wrong += 1;
    }
    // By hand: once the false ones are gone the smallest of three is held against 0.05 / 3: 1 - (1 - 0.05 / 3)^3.
    const expected = 1 - (1 - 0.05 / 3) ** 3;
    const band = 3.89 * Math.sqrt((expected * (1 - expected)) / repetitions);
    expect(Math.abs(wrong / repetitions - expected)).toBeLessThan(band);
  });

  test('take intervals whose alphas add up', () => {
    expect(bonferroniConfidence(0.95, 1)).toBeCloseTo(0.95, 15);
    expect(bonferroniConfidence(0.95, 5)).toBeCloseTo(0.99, 15);
  });
});
