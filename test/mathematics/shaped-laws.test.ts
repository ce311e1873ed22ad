import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { betaLaw } from '../../src/mathematics/beta-law.js';
import { invertCdf } from '../../src/mathematics/invert-cdf.js';
import { triangular } from '../../src/mathematics/triangular.js';
import { cutWeibull } from '../../src/mathematics/weibull.js';

const SHARES = [1e-6, 0.01, 0.25, 0.5, 0.9, 0.999] as const;

describe('the triangular law', () => {
  test('has the quantiles of its closed form', () => {
    // By hand, areas of the triangle left of x: peak 0.25, x = 0.25 has F = 0.25; x = 0.1 has F = 0.1^2 / 0.25 = 0.04;
    // x = 0.7 has F = 1 - 0.3^2 / 0.75 = 0.88.
    const { quantile, cdf } = triangular(0.25);
    for (const [u, x] of [
      [0, 0],
      [0.04, 0.1],
      [0.25, 0.25],
      [0.88, 0.7],
      [1, 1],
    ] as const) {
      expect(quantile(u)).toBeCloseTo(x, 14);
      expect(cdf(x)).toBeCloseTo(u, 14);
    }
  });

  test('may have its peak at either end', () => {
    expect(triangular(0).quantile(0.75)).toBeCloseTo(0.5, 14);
    expect(triangular(1).quantile(0.25)).toBeCloseTo(0.5, 14);
    expect(triangular(1).cdf(0.5)).toBeCloseTo(0.25, 14);
    for (const peak of [-0.1, 1.1, Number.NaN]) expect(() => triangular(peak)).toThrow(RangeError);
  });
});

describe('the Weibull law', () => {
  test('has the quantiles of its closed form, renormalised between its cuts', () => {
    for (const shape of [0.5, 1, 2, 3.6, 10, 100]) {
      const { quantile, cdf, lower, upper } = cutWeibull(shape, 5);
      const free = (x: number): number => 1 - Math.exp(-(x ** shape));
      for (const u of SHARES) {
        const x = quantile(u);
        expect((free(x) - free(lower)) / (free(upper) - free(lower))).toBeCloseTo(u, 12);
        expect(cdf(x)).toBeCloseTo(u, 12);
      }
      expect(quantile(0)).toBeCloseTo(lower, 12);
      expect(quantile(1)).toBeCloseTo(upper, 10);
    }
  });

  test('of shape 1 is exponential: mean and standard deviation 1, cut at 6', () => {
    const { upper, lower, uncutSd, quantile } = cutWeibull(1, 5);
    expect([lower, upper, uncutSd]).toEqual([0, expect.closeTo(6, 12), expect.closeTo(1, 12)]);
    // By hand: x = -ln(1 - u (1 - e^-6)).
    expect(quantile(0.5)).toBeCloseTo(-Math.log(1 - 0.5 * (1 - Math.exp(-6))), 13);
    // By hand: the mean between 0 and 6 is (1 - 7 e^-6) / (1 - e^-6).
    expect(cutWeibull(1, 5).mean).toBeCloseTo((1 - 7 * Math.exp(-6)) / (1 - Math.exp(-6)), 13);
  });

  // Standard deviation without the cut, mean and standard deviation with it: quad of mpmath 1.3.0 over the density, 30 digits.
  test.each([
    [0.5, 4.47213595499958, 1.7522367721692074, 3.190665717772978],
    [1, 1, 0.9850905300589323, 0.9541073776361186],
    [2, 0.4632513751761044, 0.8861402551356041, 0.46302801918787373],
    [3.6, 0.2780202870449759, 0.9011056796330539, 0.27802027807059443],
    [10, 0.11445721940300672, 0.9513879365732084, 0.114361902579246],
    [100, 0.012661157774877375, 0.9943829420073336, 0.012498868347305105],
  ])('of shape %d has the moments of numerical integration', (shape, uncutSd, mean, sd) => {
    const law = cutWeibull(shape, 5);
    expect(law.uncutSd / uncutSd).toBeCloseTo(1, 10);
    expect(law.mean / mean).toBeCloseTo(1, 12);
    expect(law.sd / sd).toBeCloseTo(1, 10);
  });

  test('refuses shapes outside its range', () => {
    for (const shape of [0, 0.4, 101, Number.NaN]) expect(() => cutWeibull(shape, 5)).toThrow(RangeError);
  });
});

describe('the beta law', () => {
  // scipy.stats.beta.ppf 1.17.1 at the shares 1e-6, 0.01, 0.25, 0.5, 0.9, 0.999.
  test.each([
    [
      2, 5, 0.00025828782935406356, 0.026763191142755053, 0.16116291679032652, 0.26444998329566005, 0.5103163065514917,
      0.818613866919134,
    ],
    [
      0.5, 0.5, 2.46740110027031e-12, 0.00024671981713422146, 0.14644660940672624, 0.5, 0.9755282581475768,
      0.999997532600929,
    ],
    [
      5, 1.5, 0.051930593759234436, 0.3371892307430418, 0.6752857213655428, 0.7977508703519338, 0.945754486362118,
      0.9976842324608204,
    ],
    [
      200, 300, 0.2998041075457761, 0.34973301124554146, 0.3851469047942214, 0.39986656271411614, 0.4281528536351215,
      0.4685523571144989,
    ],
    [
      0.7, 9, 2.642831395110529e-10, 0.00013697303752097385, 0.014551517839800262, 0.04497821657960602,
      0.17998804292152418, 0.4955701440249635,
    ],
  ])('with shapes %d and %d has the quantiles of SciPy', (a, b, ...expected) => {
    const { quantile } = betaLaw(a, b);
    for (const [place, u] of SHARES.entries()) {
      expect(Math.abs(quantile(u) - (expected[place] ?? Number.NaN))).toBeLessThan(1e-13);
    }
    expect([quantile(0), quantile(1)]).toEqual([0, 1]);
  });

  test('inverts its distribution function for shapes and shares of all kinds', () => {
    const shape = fc.double({ min: 0.5, max: 1000, noNaN: true });
    const share = fc.double({ min: 1e-9, max: 1 - 1e-9, noNaN: true });
    fc.assert(
      fc.property(shape, shape, share, (a, b, u) => {
        const { quantile, cdf, mean, sd } = betaLaw(a, b);
        const x = quantile(u);
        // An error of 1e-13 of the range moves the share by the density times that; the density is below 1 / sd near the
        // middle and without bound at an end, where shares of neighbours bracket u.
        const reach = 1e-13 + 1e-13 * mean;
        expect(cdf(Math.max(0, x - reach))).toBeLessThanOrEqual(u + 1e-11);
        expect(cdf(Math.min(1, x + reach))).toBeGreaterThanOrEqual(u - 1e-11);
        expect(sd).toBeGreaterThan(0);
      }),
      { seed: 20261201, numRuns: 300 },
    );
  });

  test('refuses shapes that are not above 0', () => {
    for (const shape of [0, Number.NaN, Number.POSITIVE_INFINITY]) expect(() => betaLaw(shape, 2)).toThrow(RangeError);
  });
});

describe('the inverse by halving', () => {
  test('finds the number itself where a function jumps, and the ends of its bracket', () => {
    const jump = (x: number): number => (x >= 0.1 ? 1 : 0.3);
    expect(invertCdf(jump, 0.5, -2, 3)).toBe(0.1);
    expect(invertCdf(jump, 0.2, -2, 3)).toBe(-2);
    expect(invertCdf((x) => x, 0.7, 0.7, 0.7)).toBe(0.7);
    expect(invertCdf(() => 0.5, 0.9, -1, 1)).toBe(1);
  });

  test('is the square root for a square', () => {
    expect(invertCdf((x) => x * x, 0.5, 0, 1)).toBeCloseTo(Math.SQRT1_2, 15);
  });
});
