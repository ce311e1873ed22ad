import { logGamma } from './log-gamma.js';

const MOST_TERMS = 10_000;

/**
 * Regularised lower incomplete gamma function.
 *
 *   P(a, x) = 1 / Gamma(a) int_0^x t^(a - 1) e^-t dt
 *
 * Series (DLMF 8.11.4) below a + 1, continued fraction of the upper function (DLMF 8.9.2) above; absolute error below
 * 1e-13 for a up to 100.
 *
 * @param a above 0
 * @param x 0 or more
 * @throws RangeError if an argument is outside its range
 * @see NIST Digital Library of Mathematical Functions, https://dlmf.nist.gov, chapter 8
 */
export function lowerGammaShare(a: number, x: number): number {
  if (!(a > 0 && x >= 0))
    throw new RangeError(`incomplete gamma needs a above 0 and x of 0 or more, got ${a} and ${x}`);
  if (x === 0) return 0;
  if (x === Number.POSITIVE_INFINITY) return 1;
  const scale = Math.exp(a * Math.log(x) - x - logGamma(a));
  return x < a + 1 ? scale * series(a, x) : 1 - scale * fraction(a, x);
}

/** sum_n x^n / (a (a + 1) ... (a + n)) */
function series(a: number, x: number): number {
  let term = 1 / a;
  let sum = term;
  for (let n = 1; n < MOST_TERMS && term > sum * 1e-17; n++) {
    term *= x / (a + n);
    sum += term;
  }
  return sum;
}

/** 1 / (x + 1 - a - 1 (1 - a) / (x + 3 - a - 2 (2 - a) / (x + 5 - a - ...))), by Lentz's method. */
function fraction(a: number, x: number): number {
  let b = x + 1 - a;
  let c = 1e300;
  let d = 1 / b;
  let value = d;
  for (let n = 1; n < MOST_TERMS; n++) {
    const top = n * (a - n);
    b += 2;
    d = 1 / (top * d + b);
    c = b + top / c;
    value *= c * d;
    if (Math.abs(c * d - 1) < 1e-16) break;
  }
  return value;
}
