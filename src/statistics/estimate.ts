import type { Method } from './method.js';

/**
 * A figure of a sample with its two-sided interval.
 *
 * `estimate`, `lower` and `upper` are in the unit of the numbers that went in (shares are fractions) and are null
 * together: a figure that has no interval is not given.
 */
export interface Estimate {
  readonly estimate: number | null;
  readonly lower: number | null;
  readonly upper: number | null;
  /** How the interval was made; empty if there is none. */
  readonly method: Method | '';
  /** What a reader must know beside the method: the ranks used, or why there is no figure; else empty. */
  readonly note: string;
  /** Instances behind the figure. */
  readonly instances: number;
}

/**
 * What stands in place of an estimate when the instances are too few for an interval.
 *
 * @param need what it would take, if that is no number of instances
 */
export function notEstimable(instances: number, need?: string): Estimate {
  const note = `not estimable from ${instances}${need === undefined ? '' : `: ${need}`}`;
  return { estimate: null, lower: null, upper: null, method: '', note, instances };
}

/** The estimate with one more remark in its note. */
export function withRemark(estimate: Estimate, remark: string): Estimate {
  return { ...estimate, note: estimate.note === '' ? remark : `${estimate.note}; ${remark}` };
}

/** Whether a confidence lies in 0.5 to 0.9999, the range in which the quantiles are checked. */
export function isConfidence(confidence: number): boolean {
  return confidence >= 0.5 && confidence <= 0.9999;
}

/** @throws RangeError if the confidence does not lie in that range */
export function requireConfidence(confidence: number): void {
  if (!isConfidence(confidence)) throw new RangeError(`confidence must be 0.5 to 0.9999, got ${confidence}`);
}
