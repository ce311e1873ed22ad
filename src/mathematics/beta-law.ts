import type { Distribution } from './distribution.js';
import { betaShare, logBeta } from './incomplete-beta.js';

/** Error of a quantile, as a share of the range. */
const ACCURACY = 1e-15;

/**
 * Beta law on 0 to 1 with shapes a and b.
 *
 *   mean a / (a + b),  variance a b / ((a + b)^2 (a + b + 1))
 *
 * The quantile is found by Newton's method within a bracket, to 1e-13 of the range.
 *
 * @throws RangeError if a shape is not above 0
 */
export function betaLaw(a: number, b: number): Distribution {
  if (!(a > 0 && b > 0 && Number.isFinite(a + b))) {
    throw new RangeError(`beta shapes must be above 0, got ${a} and ${b}`);
  }
  const logScale = logBeta(a, b);
  const density = (x: number): number => Math.exp((a - 1) * Math.log(x) + (b - 1) * Math.log1p(-x) - logScale);
  const mean = a / (a + b);
  const quantile = (u: number): number => {
    if (u <= 0) return 0;
    if (u >= 1) return 1;
    let [low, high, x] = [0, 1, mean];
    while (high - low > ACCURACY) {
      const excess = betaShare(x, a, b) - u;
      if (excess < 0) low = x;
      else high = x;
      const step = excess / density(x);
      const next = x - step;
      const inside = next > low && next < high;
      if (inside && Math.abs(step) <= ACCURACY) return next;
      const middle = low + (high - low) / 2;
      if (!inside && !(middle > low && middle < high)) return high;
      x = inside ? next : middle;
    }
    return high;
  };
  return {
    mean,
    sd: Math.sqrt((a * b) / (a + b + 1)) / (a + b),
    lower: 0,
    upper: 1,
    cdf: (x) => (x <= 0 ? 0 : x >= 1 ? 1 : betaShare(x, a, b)),
    quantile,
  };
}
