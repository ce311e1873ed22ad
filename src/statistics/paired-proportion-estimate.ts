import { type Estimate, notEstimable } from './estimate.js';
import { requirePairedCounts } from './paired-counts.js';
import { wilson } from './proportion-estimate.js';

/**
 * Difference of two proportions observed on the same instances, first less second, by Newcombe's method 10: the score
 * intervals (l, u) of both proportions p, joined with their correlation phi.
 *
 *   lower = d - sqrt((p1 - l1)^2 - 2 phi (p1 - l1)(u2 - p2) + (u2 - p2)^2)
 *   upper = d + sqrt((p2 - l2)^2 - 2 phi (p2 - l2)(u1 - p1) + (u1 - p1)^2),     d = p1 - p2
 *
 * @param both instances with the event under both candidates
 * @param onlyFirst instances with the event under the first only
 * @param onlySecond instances with the event under the second only
 * @param neither instances with the event under neither
 * @param confidence two-sided, e.g. 0.95
 * @returns fractions, -1 to 1; not estimable from no instances
 * @throws RangeError if a count is not a whole number from 0, or the confidence lies outside 0.5 to 0.9999
 * @see Newcombe 1998, Stat. Med. 17, 2635-2650, method 10
 */
export function pairedProportionEstimate(
  both: number,
  onlyFirst: number,
  onlySecond: number,
  neither: number,
  confidence: number,
): Estimate {
  requirePairedCounts({ both, onlyFirst, onlySecond, neither });
  const n = both + onlyFirst + onlySecond + neither;
  if (n === 0) return notEstimable(0);
  const first = wilson(both + onlyFirst, n, confidence);
  const second = wilson(both + onlySecond, n, confidence);
  const firstShare = (both + onlyFirst) / n;
  const secondShare = (both + onlySecond) / n;
  const phi = correctedPhi(both, onlyFirst, onlySecond, neither);
  const estimate = (onlyFirst - onlySecond) / n;
  return {
    estimate,
    lower: estimate - joinedReach(firstShare - first.lower, second.upper - secondShare, phi),
    upper: estimate + joinedReach(secondShare - second.lower, first.upper - firstShare, phi),
    method: 'newcombe-10',
    note: '',
    instances: n,
  };
}

/** Length of the difference of two reaches with correlation phi. */
function joinedReach(one: number, other: number, phi: number): number {
  // Equal reaches with phi = 1 cancel exactly, or to a rounding error of either sign.
  return Math.sqrt(Math.max(0, one * one - 2 * phi * one * other + other * other));
}

/**
 * Correlation of the paired outcomes, with the continuity correction of method 10: a positive numerator eh - fg is
 * lowered by n/2, but not below 0. It is 0 when a margin is empty.
 */
function correctedPhi(e: number, f: number, g: number, h: number): number {
  const margins = (e + f) * (g + h) * (e + g) * (f + h);
  if (margins === 0) return 0;
  const cross = e * h - f * g;
  const corrected = cross > 0 ? Math.max(0, cross - (e + f + g + h) / 2) : cross;
  return corrected / Math.sqrt(margins);
}
