import { describe, expect, test } from 'vitest';
import { betaQuantile, normalCdf, normalQuantile, studentQuantile } from '../../src/mathematics/inverse-cdf.js';
import { normalQuantileByBisection, phiBySeries } from './normal-by-series.js';

/** P(|T| <= t) for Student's t: t = sqrt(v) tan a has density cos^(v-1) a; both integrals by Simpson's rule. */
function studentCentralShare(t: number, freedom: number): number {
  const integral = (to: number): number => {
    const steps = 20_000;
    const width = to / steps;
    let sum = 0;
    for (let k = 0; k <= steps; k++) {
      const weight = k === 0 || k === steps ? 1 : k % 2 === 1 ? 4 : 2;
      sum += weight * Math.cos(k * width) ** (freedom - 1);
    }
    return (sum * width) / 3;
  };
  // Beyond 40 / sqrt(v) nothing is left; without this limit a narrow peak would fall between the steps.
  const end = Math.min(Math.PI / 2, 40 / Math.sqrt(freedom));
  return integral(Math.atan(t / Math.sqrt(freedom))) / integral(end);
}

/** P(X <= k) for X binomial (n, q), k small, term by term. */
function fewOrNone(k: number, n: number, q: number): number {
  let sum = 0;
  let logChoose = 0;
  for (let j = 0; j <= k; j++) {
    if (j > 0) logChoose += Math.log((n - j + 1) / j);
    sum += Math.exp(logChoose + j * Math.log(q) + (n - j) * Math.log1p(-q));
  }
  return sum;
}

/** The q at which `falling` passes `target`. */
function bisect(falling: (q: number) => number, target: number): number {
  let low = 0;
  let high = 1;
  for (let halving = 0; halving < 200; halving++) {
    const middle = (low + high) / 2;
    if (falling(middle) > target) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

describe('normal quantile', () => {
  test('is that of the published table', () => {
    // Abramowitz & Stegun 1964, tables 26.5 and 26.6, five decimals: x for an upper tail Q.
    const table = [
      [0.25, 0.67449],
      [0.05, 1.64485],
      [0.025, 1.95996],
      [0.005, 2.57583],
      [0.001, 3.09023],
      [0.0001, 3.71902],
      [0.00001, 4.26489],
      [0.000001, 4.75342],
      [0.0000001, 5.19934],
    ] as const;
    for (const [tail, x] of table) expect(Math.abs(normalQuantile(tail) + x)).toBeLessThan(5.1e-6);
  });

  test('is that of bisection on an independent series, to the accuracy it states', () => {
    const relativeError = (p: number): number => Math.abs(normalQuantile(p) / normalQuantileByBisection(p) - 1);
    for (const p of [1e-5, 1e-4, 1e-3, 0.01, 0.1, 0.3, 0.49, 0.7, 0.95, 0.999]) {
      expect(relativeError(p)).toBeLessThan(1e-12);
    }
    for (const p of [1e-7, 3e-7, 1e-6, 1 - 1e-6]) expect(relativeError(p)).toBeLessThan(1e-10);
    for (const p of [2 ** -53, 2 ** -52, 1e-15, 1e-14, 1e-13]) expect(relativeError(p)).toBeLessThan(2e-4);
    expect(normalQuantile(1 - 2 ** -53)).toBe(-normalQuantile(2 ** -53));
  });

  test('refuses 0 and 1, where jstat gives -141 and 141, and what is no probability', () => {
    for (const p of [0, 1, -0.1, 1.1, Number.NaN]) expect(() => normalQuantile(p)).toThrow(RangeError);
  });
});

test('the normal distribution function is that of an independent series', () => {
  for (let z = -8; z <= 8; z += 0.25) expect(Math.abs(normalCdf(z) - phiBySeries(z))).toBeLessThan(1e-15);
});

describe("Student's quantile", () => {
  test('is that of the published table', () => {
    // Abramowitz & Stegun 1964, table 26.10, three decimals: two-sided 95 % and 99 %.
    const table = [
      [1, 12.706, 63.657],
      [2, 4.303, 9.925],
      [5, 2.571, 4.032],
      [10, 2.228, 3.169],
      [30, 2.042, 2.75],
      [120, 1.98, 2.617],
    ] as const;
    for (const [freedom, at95, at99] of table) {
      expect(Math.abs(studentQuantile(0.975, freedom) - at95)).toBeLessThan(5.1e-4);
      expect(Math.abs(studentQuantile(0.995, freedom) - at99)).toBeLessThan(5.1e-4);
    }
  });

  test('is that of the closed forms for one and two degrees of freedom', () => {
    for (const p of [0.6, 0.9, 0.975, 0.9995]) {
      // By hand: v = 1 is Cauchy, tan(pi (p - 1/2)); v = 2 gives (2p - 1) / sqrt(2 p (1 - p)).
      expect(studentQuantile(p, 1) / Math.tan(Math.PI * (p - 0.5))).toBeCloseTo(1, 7);
      expect(studentQuantile(p, 2) / ((2 * p - 1) / Math.sqrt(2 * p * (1 - p)))).toBeCloseTo(1, 7);
    }
  });

  test('puts the stated share between its ends, by numerical integration, from 3 to 100,000 degrees of freedom', () => {
    for (const freedom of [3, 7, 31, 127, 511, 1023, 9999, 100_000]) {
      for (const confidence of [0.5, 0.8, 0.95, 0.99, 0.9999]) {
        const t = studentQuantile((1 + confidence) / 2, freedom);
        // A relative error of 1e-7 in t moves the share by at most 2 t phi(t) 1e-7 < 5e-8.
        expect(Math.abs(studentCentralShare(t, freedom) - confidence)).toBeLessThan(5e-8);
      }
    }
  });

  test('refuses arguments outside their range', () => {
    for (const p of [0, 1, Number.NaN]) expect(() => studentQuantile(p, 5)).toThrow(RangeError);
    for (const freedom of [0, -1, Number.NaN, Number.POSITIVE_INFINITY]) {
      expect(() => studentQuantile(0.9, freedom)).toThrow(RangeError);
    }
  });
});

describe('beta quantile', () => {
  test('is that of the closed forms for a shape of one', () => {
    for (const p of [1e-5, 0.025, 0.5, 0.975, 1 - 1e-5]) {
      for (const shape of [1, 2, 20, 1000, 1_000_000]) {
        // By hand: B(1, b) has F(x) = 1 - (1 - x)^b, B(a, 1) has F(x) = x^a.
        expect(Math.abs(betaQuantile(p, 1, shape) / -Math.expm1(Math.log1p(-p) / shape) - 1)).toBeLessThan(1e-6);
        expect(Math.abs(betaQuantile(p, shape, 1) / p ** (1 / shape) - 1)).toBeLessThan(1e-6);
      }
    }
  });

  test('is that of bisection on the binomial sum for few events among few or many', () => {
    // I_q(x, n - x + 1) = P(X >= x): both ends of an exact interval for a proportion.
    for (const n of [10, 64, 512, 10_000, 1_000_000]) {
      for (const x of [1, 2, 3, 4]) {
        for (const tail of [0.25, 0.05, 0.025, 0.005, 5e-5]) {
          const upper = bisect((q) => fewOrNone(x, n, q), tail);
          expect(Math.abs(betaQuantile(1 - tail, x + 1, n - x) / upper - 1)).toBeLessThan(1e-6);
          const lower = bisect((q) => fewOrNone(x - 1, n, q), 1 - tail);
          expect(Math.abs(betaQuantile(tail, x, n - x + 1) / lower - 1)).toBeLessThan(1e-6);
        }
      }
    }
  });

  test('refuses tiny p, where jstat can be tens of percent off, and shapes below one', () => {
    for (const p of [0, 1e-12, 1 - 1e-12, 1, Number.NaN]) expect(() => betaQuantile(p, 2, 3)).toThrow(RangeError);
    for (const shape of [0, 0.5, Number.NaN, Number.POSITIVE_INFINITY]) {
      expect(() => betaQuantile(0.5, shape, 2)).toThrow(RangeError);
      expect(() => betaQuantile(0.5, 2, shape)).toThrow(RangeError);
    }
  });
});
