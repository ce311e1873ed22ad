/** Coefficients of Lanczos' series for g = 7 and nine terms, as computed by Godfrey 2001. */
const LANCZOS = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059,
  12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
] as const;

/**
 * Natural logarithm of the gamma function.
 *
 *   Gamma(x) = sqrt(2 pi) t^(x - 1/2) e^-t (c0 + sum_k c_k / (x - 1 + k)),   t = x + 6.5
 *
 * Relative error of Gamma below 2e-14 for x up to 20; the absolute error of its logarithm grows as x ln x times 1e-16.
 *
 * @param x above 0
 * @throws RangeError if it is not
 * @see Lanczos 1964, SIAM Journal on Numerical Analysis B 1, 86-96
 */
export function logGamma(x: number): number {
  if (!(x > 0)) throw new RangeError(`log gamma needs a number above 0, got ${x}`);
  // Below 1/2 the series loses accuracy: Gamma(x) = Gamma(x + 1) / x.
  if (x < 0.5) return logGamma(x + 1) - Math.log(x);
  const sum = LANCZOS.reduce((total, coefficient, k) => total + (k === 0 ? coefficient : coefficient / (x - 1 + k)), 0);
  const t = x + 6.5;
  return Math.log(2 * Math.PI) / 2 + (x - 0.5) * Math.log(t) - t + Math.log(sum);
}
