import { normalQuantile } from '../mathematics/inverse-cdf.js';
import { invertCdf } from '../mathematics/invert-cdf.js';
import { type Estimate, notEstimable, requireConfidence } from './estimate.js';
import { type PairedCounts, requirePairedCounts } from './paired-counts.js';

/**
 * Difference of two proportions observed on the same instances, first less second, by Tango's score interval: all
 * differences D that the score test does not reject,
 *
 *   |f - g - n D| <= z sqrt(n (2 q + D (1 - D)))
 *
 * where f, g are the instances with the event under the first, the second only, and q is the likeliest share of the
 * latter given D: the larger root of 2 n q^2 - (f + g - (2 n - f + g) D) q - g D (1 - D) = 0.
 *
 * @param confidence two-sided, e.g. 0.95
 * @returns fractions, -1 to 1; not estimable from no instances
 * @throws RangeError if a count is not a whole number from 0, or the confidence lies outside 0.5 to 0.9999
 * @see Tango 1998, Stat. Med. 17, 891-908
 */
export function tangoEstimate(counts: PairedCounts, confidence: number): Estimate {
  requirePairedCounts(counts);
  requireConfidence(confidence);
  const { both, onlyFirst, onlySecond, neither } = counts;
  const n = both + onlyFirst + onlySecond + neither;
  if (n === 0) return notEstimable(0);
  const z = normalQuantile((1 + confidence) / 2);
  const estimate = (onlyFirst - onlySecond) / n;
  // The upper end for the sides changed is the lower end with its sign changed.
  return {
    estimate,
    lower: -upperEnd(onlySecond, onlyFirst, n, z),
    upper: upperEnd(onlyFirst, onlySecond, n, z),
    method: 'tango',
    note: '',
    instances: n,
  };
}

/** Largest difference that is not rejected. */
function upperEnd(onlyFirst: number, onlySecond: number, n: number, z: number): number {
  const shortfall = (difference: number): number => {
    const variance = scoreVariance(onlyFirst, onlySecond, n, difference);
    const distance = n * difference - (onlyFirst - onlySecond);
    if (variance > 0) return distance / Math.sqrt(variance) / z;
    return distance > 0 ? Number.POSITIVE_INFINITY : 0;
  };
  return invertCdf(shortfall, 1, (onlyFirst - onlySecond) / n, 1);
}

function scoreVariance(onlyFirst: number, onlySecond: number, n: number, difference: number): number {
  const a = 2 * n;
  const b = onlyFirst + onlySecond - (a - onlyFirst + onlySecond) * difference;
  const c = onlySecond * difference * (1 - difference);
  // Rounding must not leave a root of a number just below 0.
  const q = (b + Math.sqrt(Math.max(0, b * b + 4 * a * c))) / (2 * a);
  return n * Math.max(0, 2 * q + difference * (1 - difference));
}
