import type { Estimate } from './estimate.js';
import { proportionEstimate } from './proportion-estimate.js';

/** How often one of two candidates has the smaller value on the same instance; the three shares add up to 1. */
export interface PairedShares {
  readonly firstLess: Estimate;
  readonly tie: Estimate;
  readonly secondLess: Estimate;
}

/**
 * Shares of instances on which the first candidate has less, both the same, the second less; each with its own interval.
 *
 * @param differences first less second, one per instance that has both values
 * @param tieWithin differences of at most this size are ties, in the unit of `differences`
 * @param confidence two-sided, of each share by itself
 * @throws RangeError if the confidence lies outside 0.5 to 0.9999
 */
export function pairedShares(differences: Float64Array, tieWithin: number, confidence: number): PairedShares {
  let first = 0;
  let second = 0;
  for (const difference of differences) {
    if (difference < -tieWithin) first += 1;
    else if (difference > tieWithin) second += 1;
  }
  const n = differences.length;
  return {
    firstLess: proportionEstimate(first, n, confidence),
    tie: proportionEstimate(n - first - second, n, confidence),
    secondLess: proportionEstimate(second, n, confidence),
  };
}
