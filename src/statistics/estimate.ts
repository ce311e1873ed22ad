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
  /** How the interval was made, e.g. `wilson`; empty if there is none. */
  readonly method: string;
  /** What a reader must know beside the method: the ranks used, or why there is no figure; else empty. */
  readonly note: string;
  /** Instances behind the figure. */
  readonly instances: number;
}

/** What stands in place of an estimate when the instances are too few for an interval. */
export function notEstimable(instances: number): Estimate {
  const note = `not estimable from ${instances}`;
  return { estimate: null, lower: null, upper: null, method: '', note, instances };
}

/** @throws RangeError if the confidence does not lie in 0.5 to 0.9999, the range in which the quantiles are checked */
export function requireConfidence(confidence: number): void {
  if (!(confidence >= 0.5 && confidence <= 0.9999)) {
    throw new RangeError(`confidence must be 0.5 to 0.9999, got ${confidence}`);
  }
}
