/** Where a quantile lies among the sorted values of a sample: a part of the way from the value at one rank to the next. */
export interface QuantilePlace {
  /** Ranks from 1; equal where the quantile is one of the values. */
  readonly below: number;
  readonly above: number;
  readonly part: number;
}

/**
 * Place of a quantile by definition 7, the default of R and NumPy: 1 + (n - 1) p.
 *
 * @param n values, at least one
 * @param p probability, 0 to 1
 * @throws RangeError if there is no value or p lies outside 0 to 1
 * @see Hyndman & Fan 1996, The American Statistician 50(4), 361-365
 */
export function quantilePlace(n: number, p: number): QuantilePlace {
  if (!(p >= 0 && p <= 1)) throw new RangeError(`quantile probability must be 0 to 1, got ${p}`);
  if (n < 1) throw new RangeError('a quantile needs at least one value');
  const place = (n - 1) * p;
  return { below: 1 + Math.floor(place), above: 1 + Math.ceil(place), part: place - Math.floor(place) };
}
