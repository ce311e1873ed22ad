import { betaQuantile, normalQuantile } from '../mathematics/inverse-cdf.js';
import { type Estimate, notEstimable, requireConfidence } from './estimate.js';
import type { Method } from './method.js';

/** Fewer events, or fewer left without one, than this take the exact interval. */
const FEW = 5;

/** n' of whole instances is whole but for rounding. */
const ROUNDING = 1e-9;

/** How long an instance was watched, and whether the event ended it or the watching did (censored). */
export interface Watched {
  readonly until: number;
  readonly happened: boolean;
}

/** The product-limit curve from one event time to the next. */
export interface ProductLimitStep {
  readonly time: number;
  /** Share without the event after `time`. */
  readonly survival: number;
  /** Standard error by Greenwood's formula. */
  readonly standardError: number;
}

/**
 * Product-limit estimate of the share without an event over time, for instances watched for unequal times. With d(t)
 * events among r(t) instances still watched,
 *
 *   S(t) = prod_{t_i <= t} (1 - d_i / r_i),   Var S = S^2 sum_{t_i <= t} d_i / (r_i (r_i - d_i))   (Greenwood)
 *
 * An instance whose watching ends at an event time counts as watched at that time.
 *
 * @returns one step per time at which the event happens, ascending
 * @see Kaplan & Meier 1958, J. Am. Stat. Assoc. 53, 457-481; Greenwood 1926
 */
export function productLimitCurve(watched: readonly Watched[]): readonly ProductLimitStep[] {
  const ascending = watched.toSorted((one, other) => one.until - other.until);
  const steps: ProductLimitStep[] = [];
  let survival = 1;
  let sum = 0;
  for (let first = 0; first < ascending.length; ) {
    const time = ascending[first].until;
    let events = 0;
    let next = first;
    for (; next < ascending.length && ascending[next].until === time; next++) if (ascending[next].happened) events += 1;
    const atRisk = ascending.length - first;
    if (events > 0) {
      survival *= 1 - events / atRisk;
      sum += events / (atRisk * (atRisk - events));
      steps.push({ time, survival, standardError: survival === 0 ? 0 : survival * Math.sqrt(sum) });
    }
    first = next;
  }
  return steps;
}

/**
 * The product-limit curve at some times, each with an interval that holds at that time by itself (pointwise).
 *
 * The interval is that of a proportion among as many instances as would give Greenwood's variance without censoring,
 *
 *   n' = S (1 - S) / Var S
 *
 * Wilson's, or Clopper and Pearson's where fewer than five of n' had the event or fewer than five had not. Where nothing
 * is censored before a time, n' is the number of instances and this is the interval of a plain proportion. Where S is 0
 * or 1, n' is the number of instances not censored before.
 *
 * @param times ascending; beyond the last time watched there is no estimate
 * @param confidence two-sided, of each time by itself
 * @returns fractions, one estimate per time
 * @throws RangeError if the confidence lies outside 0.5 to 0.9999
 * @see Rothman 1978, J. Chronic Dis. 31, 557-560 (score interval with n')
 */
export function productLimitEstimates(
  watched: readonly Watched[],
  times: readonly number[],
  confidence: number,
): readonly Estimate[] {
  requireConfidence(confidence);
  const curve = productLimitCurve(watched);
  const censored = watched.filter(({ happened }) => !happened).map(({ until }) => until);
  const last = watched.reduce((latest, { until }) => Math.max(latest, until), Number.NEGATIVE_INFINITY);
  return times.map((time) => {
    const step = curve.findLast((one) => one.time <= time);
    const survival = step?.survival ?? 1;
    // After the last event nobody is left who could be watched: the curve stays at 0.
    if (time > last && survival > 0) return notEstimable(watched.length, 'nobody was watched for so long');
    const left = watched.length - censored.filter((until) => until < time).length;
    const plain = survival > 0 && survival < 1;
    const n = plain ? (survival * (1 - survival)) / (step?.standardError ?? 0) ** 2 : left;
    return { ...proportionInterval(survival, n, confidence), estimate: survival, note: '', instances: watched.length };
  });
}

/** Interval of a share among a number of instances that need not be whole. */
function proportionInterval(
  share: number,
  n: number,
  confidence: number,
): { readonly lower: number; readonly upper: number; readonly method: Method } {
  const kept = share * n;
  const lost = (1 - share) * n;
  if (Math.min(kept, lost) < FEW) {
    const tail = (1 - confidence) / 2;
    // The quantile needs shapes of 1 or more; below one instance the end of the range is on the safe side.
    const lower = kept < 1 - ROUNDING ? 0 : betaQuantile(tail, Math.max(1, kept), lost + 1);
    const upper = lost < 1 - ROUNDING ? 1 : betaQuantile(1 - tail, kept + 1, Math.max(1, lost));
    return { lower, upper, method: 'product-limit-beta' };
  }
  const z = normalQuantile((1 + confidence) / 2);
  const reach = z * Math.sqrt((kept * lost) / n + (z * z) / 4);
  const middle = kept + (z * z) / 2;
  const weight = n + z * z;
  return { lower: (middle - reach) / weight, upper: (middle + reach) / weight, method: 'product-limit-wilson' };
}
