import jstat from 'jstat';

// The only file that calls jstat. Its accuracy was measured against independent routes (the tests hold it to that), and
// the arguments it answers wrongly are refused here: `normal.inv(0)`, for one, would be -141 instead of minus infinity.

/**
 * Standard normal quantile z with Phi(z) = p.
 *
 * Relative error below 1e-12 for p in 1e-5 to 1 - 1e-5, below 1e-10 from 1e-7 to 1 - 1e-7; further out it grows, to 2e-4
 * at the smallest uniform of 53 bits, and z stays finite.
 *
 * @param p probability, strictly between 0 and 1
 * @throws RangeError if p is not
 */
export function normalQuantile(p: number): number {
  requireProbability(p);
  return jstat.normal.inv(p, 0, 1);
}

/**
 * Standard normal distribution function Phi(z), the inverse of `normalQuantile`.
 *
 * Absolute error below 1e-15; no relative accuracy in the lower tail, where it becomes 0 at about z = -8.3.
 */
export function normalCdf(z: number): number {
  return jstat.normal.cdf(z, 0, 1);
}

/**
 * Quantile of Student's t distribution, relative error below 1e-7.
 *
 * @param p probability, strictly between 0 and 1
 * @param degreesOfFreedom 1 or more
 * @throws RangeError if an argument is outside its range
 */
export function studentQuantile(p: number, degreesOfFreedom: number): number {
  requireProbability(p);
  if (!(degreesOfFreedom >= 1 && Number.isFinite(degreesOfFreedom))) {
    throw new RangeError(`degrees of freedom must be 1 or more, got ${degreesOfFreedom}`);
  }
  return jstat.studentt.inv(p, degreesOfFreedom);
}

/**
 * Quantile of the beta distribution, relative error below 1e-6 for p in 1e-5 to 1 - 1e-5 and both shapes 1 or more.
 *
 * Smaller p is refused: at 1e-12 jstat can be tens of percent off.
 *
 * @param p probability, 1e-5 to 1 - 1e-5
 * @param alpha first shape, 1 or more
 * @param beta second shape, 1 or more
 * @throws RangeError if an argument is outside its range
 */
export function betaQuantile(p: number, alpha: number, beta: number): number {
  if (!(p >= 1e-5 && p <= 1 - 1e-5)) throw new RangeError(`beta quantile is kept to 1e-5 to 1 - 1e-5, got ${p}`);
  if (!(alpha >= 1 && beta >= 1 && Number.isFinite(alpha + beta))) {
    throw new RangeError(`beta shapes must be 1 or more, got ${alpha} and ${beta}`);
  }
  return jstat.beta.inv(p, alpha, beta);
}

function requireProbability(p: number): void {
  if (!(p > 0 && p < 1)) throw new RangeError(`probability must lie strictly between 0 and 1, got ${p}`);
}
