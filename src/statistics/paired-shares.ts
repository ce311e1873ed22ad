import type { Drawn } from './drawn.js';
import { shareOf } from './drawn-estimate.js';
import type { Estimate } from './estimate.js';

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
export function pairedShares({ values, blocks }: Drawn, tieWithin: number, confidence: number): PairedShares {
  const shareWith = (counts: (difference: number) => boolean): Estimate =>
    shareOf({ values: values.map((difference) => (counts(difference) ? 1 : 0)), blocks }, confidence);
  return {
    firstLess: shareWith((difference) => difference < -tieWithin),
    tie: shareWith((difference) => Math.abs(difference) <= tieWithin),
    secondLess: shareWith((difference) => difference > tieWithin),
  };
}
