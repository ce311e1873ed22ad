import { describe, expect, test } from 'vitest';
import { binomialCdf, binomialQuantile } from '../../src/mathematics/binomial.js';

/** P(X <= k) for p = 1/parts, in exact integers, rounded once at the end. */
function exactCdf(k: number, n: number, parts: bigint): number {
  let choose = 1n;
  let sum = 0n;
  for (let j = 0; j <= k; j++) {
    if (j > 0) choose = (choose * BigInt(n - j + 1)) / BigInt(j);
    sum += choose * (parts - 1n) ** BigInt(n - j);
  }
  const digits = 10n ** 40n;
  return Number((sum * digits) / parts ** BigInt(n)) / 1e40;
}

describe('binomial distribution function', () => {
  test('is that of coins, by hand', () => {
    // Ten coins: (1 + 10) / 1024 and (1 + 10 + 45) / 1024.
    expect(binomialCdf(1, 10, 0.5)).toBeCloseTo(11 / 1024, 15);
    expect(binomialCdf(2, 10, 0.5)).toBeCloseTo(56 / 1024, 15);
  });

  test('keeps twelve digits against exact integers, in the tails too', () => {
    for (const [n, parts] of [
      [20, 4n],
      [512, 20n],
      [1000, 20n],
      [1500, 2n],
      [2000, 1000n],
    ] as const) {
      const mean = n / Number(parts);
      const sd = Math.sqrt(mean * (1 - 1 / Number(parts)));
      for (const z of [-5, -3, -2, -1, 0, 1, 2, 3, 5]) {
        const k = Math.round(mean + z * sd);
        if (k < 0) continue;
        expect(Math.abs(binomialCdf(k, n, 1 / Number(parts)) / exactCdf(k, n, parts) - 1)).toBeLessThan(1e-12);
      }
    }
  });

  test('counts failures as it counts successes', () => {
    for (const [k, n, p] of [
      [3, 10, 0.2],
      [480, 512, 0.95],
      [99_990, 100_000, 0.9999],
    ] as const) {
      expect(binomialCdf(k, n, p) + binomialCdf(n - k - 1, n, 1 - p)).toBeCloseTo(1, 12);
    }
  });

  test('holds at the ends of its arguments', () => {
    expect(binomialCdf(-1, 5, 0.3)).toBe(0);
    expect(binomialCdf(5, 5, 0.3)).toBe(1);
    expect(binomialCdf(0, 0, 0.3)).toBe(1);
    expect(binomialCdf(0, 5, 0)).toBe(1);
    expect(binomialCdf(4, 5, 1)).toBe(0);
    for (const [k, n, p] of [
      [0.5, 5, 0.3],
      [1, -1, 0.3],
      [1, 5.5, 0.3],
      [1, 5, -0.1],
      [1, 5, 1.1],
      [1, 5, Number.NaN],
    ] as const) {
      expect(() => binomialCdf(k, n, p)).toThrow(RangeError);
    }
  });
});

describe('binomial quantile', () => {
  test('is the first count whose distribution function passes the probability', () => {
    for (const [q, n, p] of [
      [0.025, 10, 0.5],
      [0.5, 512, 0.95],
      [0.999, 1000, 0.01],
    ] as const) {
      const k = binomialQuantile(q, n, p);
      expect(binomialCdf(k, n, p)).toBeGreaterThan(q);
      expect(binomialCdf(k - 1, n, p)).toBeLessThanOrEqual(q);
    }
    expect(binomialQuantile(0, 7, 1)).toBe(7);
    expect(binomialQuantile(0.5, 0, 0.5)).toBe(0);
  });

  test('refuses a probability outside its range', () => {
    for (const q of [-0.1, 1, Number.NaN]) expect(() => binomialQuantile(q, 5, 0.5)).toThrow(RangeError);
  });
});
