import { describe, expect, test } from 'vitest';
import { deviationOf } from '../../src/sampling/deviation.js';
import type { Law } from '../../src/study/study.js';
import { phiBySeries } from '../mathematics/normal-by-series.js';

/** Mean and standard deviation by Simpson's rule over a normal score cut at +-5, u being the share below it. */
function momentsOf(law: Law, scale = 1): { mean: number; sd: number } {
  const { quantile } = deviationOf(law, scale);
  const steps = 4000;
  const kept = phiBySeries(5) - phiBySeries(-5);
  let [sum, squares] = [0, 0];
  for (let k = 0; k <= steps; k++) {
    const z = (10 * k) / steps - 5;
    const simpson = k === 0 || k === steps ? 1 : k % 2 === 1 ? 4 : 2;
    const share = (simpson * (10 / steps) * Math.exp((-z * z) / 2)) / (3 * Math.sqrt(2 * Math.PI) * kept);
    const value = quantile((phiBySeries(z) - phiBySeries(-5)) / kept);
    sum += share * value;
    squares += share * value * value;
  }
  return { mean: sum, sd: Math.sqrt(squares - sum * sum) };
}

describe('a normal deviation', () => {
  const { quantile } = deviationOf({ law: 'normal', sd: 2 }, 1);

  test('follows the normal on condition that it lies within 5 sd', () => {
    const kept = phiBySeries(5) - phiBySeries(-5);
    for (const u of [1e-6, 0.001, 0.025, 0.3, 0.5, 0.9, 0.999, 1 - 1e-6]) {
      expect((phiBySeries(quantile(u) / 2) - phiBySeries(-5)) / kept).toBeCloseTo(u, 12);
    }
  });

  test('is cut, not clipped: only the very ends reach 5 sd', () => {
    expect(quantile(0)).toBeCloseTo(-10, 9);
    expect(quantile(1)).toBeCloseTo(10, 9);
    expect(quantile(1e-7)).toBeGreaterThan(-10 + 0.02);
    expect(quantile(1 - 1e-7)).toBeLessThan(10 - 0.02);
  });

  test('has mean 0 and all but 7.4e-6 of its standard deviation', () => {
    // By hand: variance of a normal cut at +-5 is 1 - 10 phi(5) / (Phi(5) - Phi(-5)) = 1 - 1.48672e-5.
    const { mean, sd } = momentsOf({ law: 'normal', sd: 2 });
    expect(mean).toBeCloseTo(0, 12);
    expect(sd / 2).toBeCloseTo(0.9999926, 7);
  });
});

describe('a truncated normal deviation', () => {
  test('keeps to its ends and follows the normal between them', () => {
    const { quantile } = deviationOf({ law: 'truncated-normal', sd: 0.012, lower: -0.03, upper: 0.006 }, 1);
    expect(quantile(0)).toBeCloseTo(-0.03, 12);
    expect(quantile(1)).toBeCloseTo(0.006, 12);
    const [from, to] = [phiBySeries(-2.5), phiBySeries(0.5)];
    for (const u of [0.01, 0.3, 0.7, 0.99]) {
      expect((phiBySeries(quantile(u) / 0.012) - from) / (to - from)).toBeCloseTo(u, 12);
    }
  });

  test('has the moments of its docstring, the mean not at 0 for unequal ends', () => {
    // Johnson, Kotz & Balakrishnan 1994, Continuous Univariate Distributions 1, section 13.10.1, worked by hand for
    // a = -2.5, b = 0.5: phi 0.0175283, 0.3520653; Phi 0.0062097, 0.6914625; m = -0.3345370/0.6852528 = -0.4881950;
    // variance 1 + (-0.0438208 - 0.1760327)/0.6852528 - 0.2383344 = 0.4408301.
    const law: Law = { law: 'truncated-normal', sd: 0.012, lower: -0.03, upper: 0.006 };
    const { mean, sd } = momentsOf(law);
    expect(mean / 0.012).toBeCloseTo(-0.488195, 6);
    expect(sd / 0.012).toBeCloseTo(Math.sqrt(0.4408301), 6);
    expect(deviationOf(law, 1).mean / 0.012).toBeCloseTo(-0.488195, 6);
  });

  test('has mean exactly 0 for ends of equal distance', () => {
    expect(deviationOf({ law: 'truncated-normal', sd: 0.012, lower: -0.04, upper: 0.04 }, 1).mean).toBe(0);
  });

  test('with ends beyond 5 sd is the normal', () => {
    const wide = deviationOf({ law: 'truncated-normal', sd: 0.01, lower: -1, upper: 0.9 }, 1);
    const normal = deviationOf({ law: 'normal', sd: 0.01 }, 1);
    for (const u of [0, 0.2, 0.99, 1]) expect(wide.quantile(u)).toBe(normal.quantile(u));
    expect(wide.mean).toBe(0);
  });

  test('that would keep nothing is refused', () => {
    for (const [lower, upper] of [
      [0.06, 0.07],
      [0.01, -0.01],
      [0.01, 0.01],
      [Number.NaN, 0.01],
    ] as const) {
      expect(() => deviationOf({ law: 'truncated-normal', sd: 0.01, lower, upper }, 1)).toThrow(RangeError);
    }
  });
});

describe('a lognormal deviation', () => {
  test('keeps mean 0 and its standard deviation, in the unit of the scale', () => {
    // Standard deviation kept of a lognormal with its logarithm cut at +-5: 1 - 1.84e-5 for a ratio of 0.3,
    // 1 - 3.965e-4 for 1, by numerical integration over the normal score with a general-purpose library.
    for (const [sd, scale, kept] of [
      [0.3, 1, 1 - 1.84e-5],
      [1, 1, 1 - 3.965e-4],
      [0.0024, 0.008, 1 - 1.84e-5],
    ] as const) {
      const moments = momentsOf({ law: 'lognormal', sd }, scale);
      expect(Math.abs(moments.mean)).toBeLessThan(1e-9 * sd);
      expect(Math.abs(moments.sd / sd / kept - 1)).toBeLessThan(1e-6);
      expect(deviationOf({ law: 'lognormal', sd }, scale).mean).toBe(0);
    }
  });

  test('has a normal logarithm', () => {
    const { quantile } = deviationOf({ law: 'lognormal', sd: 0.3 }, 1);
    const score = (u: number): number => Math.log1p(quantile(u));
    // By hand: s^2 = ln(1 + 0.09) = 0.0861777; the middle lies at the shift, -s^2/2 but for the cut.
    const s = Math.sqrt(0.0861777);
    expect(score(0.5)).toBeCloseTo(-0.0861777 / 2, 5);
    expect((score(0.975) - score(0.5)) / s).toBeCloseTo(1.959964, 4);
    expect((score(1) - score(0.5)) / s).toBeCloseTo(5, 5);
    expect((score(0) - score(0.5)) / s).toBeCloseTo(-5, 5);
  });

  test('needs a nominal value above 0', () => {
    for (const scale of [0, -1, Number.NaN]) {
      expect(() => deviationOf({ law: 'lognormal', sd: 0.3 }, scale)).toThrow(RangeError);
    }
  });
});

test('a uniform deviation runs evenly from end to end', () => {
  const { quantile, mean } = deviationOf({ law: 'uniform', halfWidth: 0.05 }, 1);
  expect([quantile(0), quantile(0.25), quantile(0.5), quantile(1)]).toEqual([-0.05, -0.025, 0, 0.05]);
  expect(mean).toBe(0);
  // By hand: a uniform of half width w has standard deviation w / sqrt(3).
  expect(momentsOf({ law: 'uniform', halfWidth: 0.05 }).sd).toBeCloseTo(0.05 / Math.sqrt(3), 8);
});

test('a fixed deviation and every spread of 0 is 0, whatever its ends and its scale', () => {
  const laws: Law[] = [
    { law: 'fixed' },
    { law: 'normal', sd: 0 },
    { law: 'truncated-normal', sd: 0, lower: 0, upper: 0 },
    { law: 'lognormal', sd: 0 },
    { law: 'uniform', halfWidth: 0 },
  ];
  for (const law of laws) {
    const deviation = deviationOf(law, 0);
    expect(deviation.spreads).toBe(false);
    expect([deviation.mean, deviation.quantile(0), deviation.quantile(0.7)]).toEqual([0, 0, 0]);
  }
});
