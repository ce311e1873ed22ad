import { describe, expect, test } from 'vitest';
import { betaShare } from '../../src/mathematics/incomplete-beta.js';
import { lowerGammaShare } from '../../src/mathematics/incomplete-gamma.js';
import { logGamma } from '../../src/mathematics/log-gamma.js';

// "SciPy": values of scipy.special 1.17.1 (gammaln, gammainc, betainc), printed to all digits.

describe('log gamma', () => {
  test('is the factorial at whole numbers and the square root of pi at one half', () => {
    let factorial = 1;
    for (let n = 1; n <= 20; n++) {
      expect(Math.exp(logGamma(n)) / factorial).toBeCloseTo(1, 12);
      factorial *= n;
    }
    expect(Math.exp(2 * logGamma(0.5))).toBeCloseTo(Math.PI, 13);
  });

  test.each([
    [0.01, 4.599479878042022],
    [1.5, -0.12078223763524526],
    [50.5, 146.51925549072064],
    [300, 1409.2020674704117],
  ])('of %d is that of SciPy', (x, expected) => {
    expect(Math.abs(logGamma(x) - expected)).toBeLessThan(1e-14 * Math.max(1, Math.abs(expected)) * 5);
  });

  test('refuses what is not above 0', () => {
    for (const x of [0, -1, Number.NaN]) expect(() => logGamma(x)).toThrow(RangeError);
  });
});

describe('the incomplete gamma function', () => {
  test('is the exponential law for a = 1 and a sum of Poisson terms for a = 4', () => {
    for (const x of [0, 0.01, 0.7, 2, 5, 40]) {
      expect(lowerGammaShare(1, x)).toBeCloseTo(-Math.expm1(-x), 14);
      // By hand: P(4, x) = 1 - e^-x (1 + x + x^2 / 2 + x^3 / 6).
      expect(lowerGammaShare(4, x)).toBeCloseTo(1 - Math.exp(-x) * (1 + x + (x * x) / 2 + x ** 3 / 6), 13);
    }
    expect(lowerGammaShare(2, Number.POSITIVE_INFINITY)).toBe(1);
  });

  test.each([
    [0.5, 0.1, 0.34527915398142317],
    [1.5, 2, 0.7385358700508888],
    [1.02, 0.03, 0.027313219628424618],
    [3, 1e-3, 1.6654171665278094e-10],
    [1.5, 24.4, 0.9999999998561183],
    [11, 10, 0.41696024980701485],
  ])('P(%d, %d) is that of SciPy', (a, x, expected) => {
    expect(Math.abs(lowerGammaShare(a, x) / expected - 1)).toBeLessThan(1e-13);
  });

  test('refuses arguments outside its range', () => {
    for (const [a, x] of [
      [0, 1],
      [1, -1],
      [Number.NaN, 1],
    ] as const) {
      expect(() => lowerGammaShare(a, x)).toThrow(RangeError);
    }
  });
});

describe('the incomplete beta function', () => {
  test('is a power for a shape of one and the arc sine law for two shapes of one half', () => {
    for (const x of [0, 1e-6, 0.2, 0.5, 0.93, 1]) {
      expect(betaShare(x, 3, 1)).toBeCloseTo(x ** 3, 14);
      expect(betaShare(x, 1, 2.5)).toBeCloseTo(1 - (1 - x) ** 2.5, 14);
      expect(betaShare(x, 0.5, 0.5)).toBeCloseTo((2 / Math.PI) * Math.asin(Math.sqrt(x)), 13);
    }
  });

  test.each([
    [0.5, 0.5, 0.3, 0.36901011956554536],
    [2, 5, 0.2, 0.3446400000000002],
    [2, 5, 0.01, 0.0014604476049999997],
    [30, 4, 0.95, 0.91919050658563],
    [1000, 500, 0.66, 0.2904999354098819],
    [0.7, 9, 1e-6, 0.0003195581878157295],
    [8, 2, 0.999, 0.9999641676225036],
  ])('with shapes %d and %d at %d is that of SciPy', (a, b, x, expected) => {
    expect(Math.abs(betaShare(x, a, b) / expected - 1)).toBeLessThan(1e-11);
  });

  test('refuses arguments outside its range', () => {
    for (const [x, a, b] of [
      [-0.1, 1, 1],
      [1.1, 1, 1],
      [Number.NaN, 1, 1],
      [0.5, 0, 1],
    ] as const) {
      expect(() => betaShare(x, a, b)).toThrow(RangeError);
    }
  });
});
