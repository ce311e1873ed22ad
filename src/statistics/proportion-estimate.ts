import { betaQuantile, normalQuantile } from '../mathematics/inverse-cdf.js';
import { type Estimate, notEstimable, requireConfidence } from './estimate.js';

/** Fewer events, or fewer instances without the event, than this take the exact interval. */
const FEW_EVENTS = 5;

/** Ends of an interval for a proportion, as fractions. */
export interface ProportionInterval {
  readonly lower: number;
  readonly upper: number;
}

/**
 * Share of instances with an event: Wilson's interval, or Clopper and Pearson's where fewer than five instances had the
 * event or fewer than five had not, because there Wilson's covers less than it says.
 *
 * @param events instances with the event, a whole number from 0 to n
 * @param n instances
 * @param confidence two-sided, e.g. 0.95
 * @returns fractions; not estimable from no instances
 * @throws RangeError if the counts are not such numbers or the confidence lies outside 0.5 to 0.9999
 */
export function proportionEstimate(events: number, n: number, confidence: number): Estimate {
  requireCounts(events, n);
  requireConfidence(confidence);
  if (n === 0) return notEstimable(0);
  const few = Math.min(events, n - events) < FEW_EVENTS;
  const { lower, upper } = few ? clopperPearson(events, n, confidence) : wilson(events, n, confidence);
  const method = few ? 'clopper-pearson' : 'wilson';
  return { estimate: events / n, lower, upper, method, note: '', instances: n };
}

/**
 * Score interval of a proportion: all p that the test |x - n p| <= z sqrt(n p (1 - p)) does not reject.
 *
 *   (x + z^2/2 -+ z sqrt(x (n - x)/n + z^2/4)) / (n + z^2)
 *
 * @param events x, a whole number from 0 to n
 * @param n 1 or more
 * @throws RangeError if the counts or the confidence are out of range
 * @see Wilson 1927, J. Am. Stat. Assoc. 22, 209-212; Newcombe 1998, Stat. Med. 17, 857-872, method 3
 */
export function wilson(events: number, n: number, confidence: number): ProportionInterval {
  requireCounts(events, n, 1);
  requireConfidence(confidence);
  const z = normalQuantile((1 + confidence) / 2);
  const middle = events + (z * z) / 2;
  const reach = z * Math.sqrt((events * (n - events)) / n + (z * z) / 4);
  const weight = n + z * z;
  // At the ends the formula gives 0 and 1 but for rounding.
  return {
    lower: events === 0 ? 0 : (middle - reach) / weight,
    upper: events === n ? 1 : (middle + reach) / weight,
  };
}

/**
 * Exact interval of a proportion: the p at which x or more, and x or fewer, events have probability (1 - confidence)/2.
 * Never covers less than `confidence`.
 *
 * @param events x, a whole number from 0 to n
 * @param n 1 or more
 * @throws RangeError if the counts or the confidence are out of range
 * @see Clopper & Pearson 1934, Biometrika 26, 404-413; Newcombe 1998, Stat. Med. 17, 857-872, method 5
 */
export function clopperPearson(events: number, n: number, confidence: number): ProportionInterval {
  requireCounts(events, n, 1);
  requireConfidence(confidence);
  const tail = (1 - confidence) / 2;
  return {
    lower: events === 0 ? 0 : betaQuantile(tail, events, n - events + 1),
    upper: events === n ? 1 : betaQuantile(1 - tail, events + 1, n - events),
  };
}

function requireCounts(events: number, n: number, least = 0): void {
  if (!(Number.isInteger(n) && n >= least && Number.isInteger(events) && events >= 0 && events <= n)) {
    throw new RangeError(`events must be a whole number from 0 to n, n from ${least}, got ${events} of ${n}`);
  }
}
