import { binomialQuantile } from '../mathematics/binomial.js';
import { type Estimate, notEstimable, requireConfidence } from './estimate.js';
import { orderStatistics } from './order-statistics.js';
import { quantilePlace } from './quantile-place.js';

/** Ranks (from 1) of the two order statistics that bound a quantile. */
export interface QuantileRanks {
  readonly lower: number;
  readonly upper: number;
}

/**
 * Quantile with the interval between two order statistics. It holds for any law of the values, ties included: the number
 * of values below the quantile is binomial (n, p), so each end misses with a probability of at most (1 - confidence)/2.
 *
 * The estimate itself interpolates (definition 7 of Hyndman and Fan); the note names the ranks.
 *
 * @param values one per instance, finite, any unit and order; only read
 * @param p probability of the quantile, strictly between 0 and 1
 * @param confidence two-sided, e.g. 0.95
 * @returns in the unit of `values`; not estimable if the sample is too small to hold both ranks
 * @throws RangeError if p or the confidence is out of range
 * @see David & Nagaraja 2003, Order Statistics, 3rd ed., section 7.1
 */
export function quantileEstimate(values: Float64Array, p: number, confidence: number): Estimate {
  const n = values.length;
  const ranks = quantileRanks(n, p, confidence);
  if (ranks === null) return notEstimable(n);
  const place = quantilePlace(n, p);
  const found = orderStatistics(values, [ranks.lower, place.below, place.above, ranks.upper]);
  const at = (rank: number): number => found.get(rank) ?? Number.NaN;
  return {
    estimate: at(place.below) + (at(place.above) - at(place.below)) * place.part,
    lower: at(ranks.lower),
    upper: at(ranks.upper),
    method: 'order-statistics',
    note: `ranks ${ranks.lower} and ${ranks.upper}`,
    instances: n,
  };
}

/**
 * The largest lower and the smallest upper rank for which P(fewer than `lower` values lie below the quantile) and
 * P(`upper` or more do) are each at most (1 - confidence)/2.
 *
 * @returns null if n values hold no such ranks
 * @throws RangeError if p or the confidence is out of range
 */
export function quantileRanks(n: number, p: number, confidence: number): QuantileRanks | null {
  if (!(p > 0 && p < 1)) throw new RangeError(`quantile probability must lie strictly between 0 and 1, got ${p}`);
  requireConfidence(confidence);
  const tail = (1 - confidence) / 2;
  // Fewer than r below has probability F(r - 1), so r is the first k with F(k) above the tail. The upper rank is the
  // lower rank of the quantile 1 - p counted from the other end.
  const lower = binomialQuantile(tail, n, p);
  const fromTop = binomialQuantile(tail, n, 1 - p);
  return lower < 1 || fromTop < 1 ? null : { lower, upper: n + 1 - fromTop };
}
