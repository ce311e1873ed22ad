import { describe, expect, test } from 'vitest';
import { deviationOf } from '../../src/sampling/deviation.js';
import { lawMoments } from '../../src/study/law-moments.js';
import { lawSupport } from '../../src/study/law-support.js';
import type { Law, MixtureLaw } from '../../src/study/study.js';
import { scaledLawOf } from '../study/scaled-law.js';

/** Mean and standard deviation by the midpoint rule over u, in `count` equal shares. */
function momentsOf(law: Law, count: number): { mean: number; sd: number } {
  const { quantile } = deviationOf(law, 1);
  let [sum, squares] = [0, 0];
  for (let k = 0; k < count; k++) {
    const value = quantile((k + 0.5) / count);
    sum += value;
    squares += value * value;
  }
  return { mean: sum / count, sd: Math.sqrt(squares / count - (sum / count) ** 2) };
}

const MIXTURE: MixtureLaw = {
  law: 'mixture',
  factor: 1,
  parts: [
    { weight: 0.9, at: 0, law: { law: 'normal', sd: 0.01 } },
    { weight: 0.07, at: -0.1, law: { law: 'uniform', halfWidth: 0.03 } },
    { weight: 0.03, at: 0.05, law: { law: 'fixed' } },
  ],
};

const LAWS: readonly (readonly [string, Law])[] = [
  ['triangular', { law: 'triangular', halfWidth: 0.2, peakFraction: 0.1 }],
  ['weibull', { law: 'weibull', shape: 2, sd: 0.1 }],
  ['long-tailed weibull', { law: 'weibull', shape: 1, sd: 0.1 }],
  ['beta', { law: 'beta', alpha: 2, beta: 5, halfWidth: 0.2 }],
  ['resampled', { law: 'resampled', values: [-0.3, -0.1, 0, 0, 0.4] }],
  ['mixture', MIXTURE],
  ['lognormal', { law: 'lognormal', sd: 1 }],
  ['normal', { law: 'normal', sd: 0.1 }],
  ['truncated normal', { law: 'truncated-normal', sd: 0.1, lower: -0.1, upper: 0.15 }],
  ['uniform', { law: 'uniform', halfWidth: 0.2 }],
];

describe.each(LAWS)('a %s deviation', (_, law) => {
  const deviation = deviationOf(law, 1);

  test('has the mean it states and the moments that are told of it', () => {
    const { mean, sd } = momentsOf(law, law.law === 'mixture' ? 20_000 : 200_000);
    const told = lawMoments(law, 1);
    // Midpoints of so many shares miss less than 6e-4 of the variance even of the longest tail here.
    expect(Math.abs(mean - deviation.mean)).toBeLessThan(2e-5 * told.sd);
    expect(Math.abs(told.mean - deviation.mean)).toBeLessThan(1e-12);
    expect(Math.abs(sd / told.sd - 1)).toBeLessThan(3e-4);
  });

  test('lies within its support and reaches both ends of it', () => {
    const { lower, upper } = lawSupport(law, 1);
    // The support of a lognormal leaves out the shift that its cut makes, 4e-4 of its logarithm at most for sd 1.
    const slack = law.law === 'lognormal' ? 2e-2 : 1e-9;
    expect(Math.abs(deviation.quantile(0) - lower)).toBeLessThan(slack);
    expect(Math.abs(deviation.quantile(1) - upper)).toBeLessThan(law.law === 'lognormal' ? 0.05 * upper : slack);
  });

  test('has a quantile that never falls, and a distribution function that inverts it', () => {
    let before = Number.NEGATIVE_INFINITY;
    for (let k = 0; k <= 500; k++) {
      const u = k / 500;
      const value = deviation.quantile(u);
      expect(value).toBeGreaterThanOrEqual(before);
      before = value;
      // F(Q(u)) >= u, and just below Q(u) at most u: also where values gather.
      expect(deviation.cdf(value + 1e-12)).toBeGreaterThanOrEqual(u - 1e-9);
      expect(deviation.cdf(value - 1e-12)).toBeLessThanOrEqual(u + 1e-9);
    }
  });

  test('scaled about its mean has the scaled quantiles', () => {
    // A lognormal keeps its mean and scales its logarithm instead; its own test is that of the variants.
    if (law.law === 'lognormal') return;
    const wider = deviationOf(scaledLawOf(law, 1.7), 1);
    for (const u of [1e-9, 0.03, 0.5, 0.77, 0.999]) {
      // Of unequal ends only tests can write: a truncated normal is scaled about the middle of its normal, which is 0.
      const middle = law.law === 'truncated-normal' ? 0 : deviation.mean;
      const expected = middle + 1.7 * (deviation.quantile(u) - middle);
      expect(wider.quantile(u)).toBeCloseTo(expected, 12);
    }
    expect(deviationOf(scaledLawOf(law, 0), 1).spreads).toBe(false);
  });
});

test('a triangular deviation has its mean at 0, not the middle of its range', () => {
  // By hand: range 0.4, peak at 0.04, mean (0 + 0.04 + 0.4) / 3 = 0.44 / 3.
  const { quantile } = deviationOf({ law: 'triangular', halfWidth: 0.2, peakFraction: 0.1 }, 1);
  expect(quantile(0)).toBeCloseTo(-0.44 / 3, 14);
  expect(quantile(0.1)).toBeCloseTo(0.04 - 0.44 / 3, 14);
  expect(quantile(1)).toBeCloseTo(0.4 - 0.44 / 3, 14);
});

test('a resampled deviation takes the value of definition 1 of Hyndman & Fan', () => {
  const { quantile, spreads } = deviationOf({ law: 'resampled', values: [-0.3, -0.1, 0, 0, 0.4] }, 1);
  // By hand: n = 5, x_(ceil(5 u)); R: quantile(c(-.3, -.1, 0, 0, .4), u, type = 1).
  for (const [u, value] of [
    [0, -0.3],
    [0.2, -0.3],
    [0.2001, -0.1],
    [0.5, 0],
    [0.8, 0],
    [0.81, 0.4],
    [1, 0.4],
  ] as const) {
    expect(quantile(u)).toBe(value);
  }
  expect(spreads).toBe(true);
  expect(deviationOf({ law: 'resampled', values: [0, 0] }, 1).spreads).toBe(false);
  expect(() => deviationOf({ law: 'resampled', values: [] }, 1)).toThrow(RangeError);
});

describe('a mixture', () => {
  const { quantile } = deviationOf(MIXTURE, 1);
  // By hand: 0.9 x 0 - 0.07 x 0.1 + 0.03 x 0.05 = -0.0055 is taken off.
  const mean = -0.0055;

  test('inverts the mixed distribution function', () => {
    // By hand: the uniform part alone lies below -0.07; its first half has the share 0.035 and ends at -0.1.
    expect(quantile(0.035)).toBeCloseTo(-0.1 - mean, 12);
    expect(quantile(0.0175)).toBeCloseTo(-0.115 - mean, 12);
    // By hand: the normal part ends at 0.05, where the fixed part begins; it fills the last 3 %.
    expect(quantile(0.9700001)).toBeCloseTo(0.05 - mean, 12);
    expect(quantile(0.99)).toBeCloseTo(0.05 - mean, 15);
    expect(quantile(0.99)).toBe(quantile(1));
    // By hand: 0.07 + 0.9 / 2 = 0.52 is the middle of the normal part.
    expect(quantile(0.52)).toBeCloseTo(0 - mean, 12);
  });

  test('of parts without spread at one place spreads nothing', () => {
    const part = { weight: 0.5, at: 0.2, law: { law: 'fixed' } } as const;
    const deviation = deviationOf({ law: 'mixture', factor: 1, parts: [part, part] }, 1);
    expect(deviation.spreads).toBe(false);
    expect(deviation.quantile(0.3)).toBeCloseTo(0, 15);
  });
});
