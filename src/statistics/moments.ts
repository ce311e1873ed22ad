/** Count, mean and variance (divisor count - 1; 0 below two values) of a sample. */
export interface Moments {
  readonly count: number;
  readonly mean: number;
  readonly variance: number;
}

/**
 * Moments in one pass without sums of squares, so that a large common offset costs no digits and equal values have a
 * variance of exactly 0.
 *
 * @param values finite
 * @returns a mean of 0 for no values
 * @see Welford 1962, Technometrics 4(3), 419-420
 */
export function summariseMoments(values: Float64Array): Moments {
  let count = 0;
  let mean = 0;
  let squares = 0;
  for (const value of values) {
    count += 1;
    const fromOldMean = value - mean;
    mean += fromOldMean / count;
    squares += fromOldMean * (value - mean);
  }
  return { count, mean, variance: count < 2 ? 0 : squares / (count - 1) };
}
