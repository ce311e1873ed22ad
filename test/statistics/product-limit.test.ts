import seedrandom from 'seedrandom';
import { describe, expect, test } from 'vitest';
import { productLimitCurve, productLimitEstimates, type Watched } from '../../src/statistics/product-limit.js';
import { proportionEstimate } from '../../src/statistics/proportion-estimate.js';

/** Weeks of remission of 21 patients, censored where watching ended: Freireich et al. 1963, Blood 21, 699, 6-MP arm. */
const REMISSION = watched('6 6 6 6+ 7 9+ 10 10+ 11+ 13 16 17+ 19+ 20+ 22 23 25+ 32+ 32+ 34+ 35+');

function watched(text: string): readonly Watched[] {
  return text.split(' ').map((one) => ({ until: Number.parseFloat(one), happened: !one.endsWith('+') }));
}

describe('product-limit curve', () => {
  test('is the published one of the remission times', () => {
    // Survival and Greenwood's standard error as in many textbooks, e.g. Kalbfleisch & Prentice 2002; six digits worked
    // anew from the formulas.
    const expected = [
      [6, 0.857143, 0.07636],
      [7, 0.806723, 0.086935],
      [10, 0.752941, 0.09635],
      [13, 0.690196, 0.106815],
      [16, 0.627451, 0.114054],
      [22, 0.537815, 0.128234],
      [23, 0.448179, 0.134591],
    ] as const;
    const curve = productLimitCurve(REMISSION);
    expect(curve.map(({ time }) => time)).toEqual(expected.map(([time]) => time));
    for (const [index, [, survival, standardError]] of expected.entries()) {
      expect(Math.abs(curve[index].survival - survival)).toBeLessThan(5.1e-7);
      expect(Math.abs(curve[index].standardError - standardError)).toBeLessThan(5.1e-7);
    }
  });

  test('does not depend on the order of instances, and has no step without an event', () => {
    expect(productLimitCurve(REMISSION.toReversed())).toEqual(productLimitCurve(REMISSION));
    expect(productLimitCurve(watched('3+ 5+ 5+'))).toEqual([]);
    expect(productLimitCurve([])).toEqual([]);
  });
});

describe('its pointwise band', () => {
  test('is that of a plain proportion where nothing is censored before', () => {
    const all = watched('2 3 3 5 8 8 9 12 14 15 15 18 20+ 20+ 20+ 20+ 20+ 20+ 20+ 20+ 20+ 20+');
    const times = [1, 2, 8, 15, 20];
    const without = [22, 21, 16, 11, 10]; // counted
    for (const [index, estimate] of productLimitEstimates(all, times, 0.95).entries()) {
      const plain = proportionEstimate(without[index], 22, 0.95);
      expect(estimate.estimate).toBeCloseTo(plain.estimate ?? 9, 12);
      expect(estimate.lower).toBeCloseTo(plain.lower ?? 9, 9);
      expect(estimate.upper).toBeCloseTo(plain.upper ?? 9, 9);
      const method = plain.method === 'wilson' ? 'product-limit-wilson' : 'product-limit-beta';
      expect(estimate).toMatchObject({ method, note: '', instances: 22 });
    }
  });

  test('widens with censoring', () => {
    // By hand at week 23: n' = 0.448179 x 0.551821 / 0.134591^2 = 13.6527 of 21; z = 1.959964; kept 6.11888, lost 7.53383,
    // middle 8.03961, reach 1.959964 sqrt(6.11888 x 7.53383 / 13.6527 + 0.960365) = 4.08151, weight 17.49416.
    const [estimate] = productLimitEstimates(REMISSION, [23], 0.95);
    expect(estimate.lower).toBeCloseTo((8.03961 - 4.08151) / 17.49416, 4);
    expect(estimate.upper).toBeCloseTo((8.03961 + 4.08151) / 17.49416, 4);
  });

  test('is exact at both ends: 0 and 1 seen of n', () => {
    const [none] = productLimitEstimates(watched('9+ 9+ 9+ 9+ 9+ 9+ 9+ 9+ 9+ 9+'), [9], 0.95);
    // By hand: S^10 = 0.025.
    expect(none).toMatchObject({ estimate: 1, upper: 1, lower: expect.closeTo(0.025 ** 0.1, 6) });
    const [all] = productLimitEstimates(watched('1 2 3 4'), [5], 0.95);
    expect(all).toMatchObject({ estimate: 0, lower: 0, upper: expect.closeTo(1 - 0.025 ** 0.25, 6) });
  });

  test('ends where nobody is watched any more', () => {
    const [last, beyond] = productLimitEstimates(REMISSION, [35, 36], 0.95);
    expect(last.estimate).toBeCloseTo(0.448179, 6);
    expect(beyond).toMatchObject({ estimate: null, note: 'not estimable from 21: nobody was watched for so long' });
    expect(productLimitEstimates([], [1], 0.95)[0]).toMatchObject({ estimate: null });
    expect(() => productLimitEstimates(REMISSION, [1], 1)).toThrow(RangeError);
  });

  test('covers about what it says under random censoring', () => {
    // Events and censoring exponential, so that a third of 60 is censored before the median: S(t) = exp(-t).
    const draw = seedrandom.tychei('product limit');
    const repetitions = 2000;
    const time = Math.log(2);
    let covered = 0;
    for (let repetition = 0; repetition < repetitions; repetition++) {
      const sample = Array.from({ length: 60 }, () => {
        const event = -Math.log(1 - draw.double());
        const end = -Math.log(1 - draw.double()) / 0.6;
        return { until: Math.min(event, end), happened: event <= end };
      });
      const [{ lower, upper }] = productLimitEstimates(sample, [time], 0.95);
      if (lower !== null && upper !== null && lower <= 0.5 && 0.5 <= upper) covered += 1;
    }
    // Wilson's interval of 60 covers 0.94 to 0.96 near one half; 3.89 standard errors of 2000 repetitions beside it.
    expect(Math.abs(covered / repetitions - 0.95)).toBeLessThan(0.01 + 3.89 * Math.sqrt((0.95 * 0.05) / repetitions));
  });
});
