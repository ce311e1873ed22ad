import { orderStatistic } from './order-statistic.js';

/**
 * Quantile of a sample, linear between neighbouring values (definition 7, the default of R and NumPy).
 *
 * @param values finite, in any order, at least one; only read
 * @param p probability, 0 to 1
 * @returns in the unit of `values`
 * @throws RangeError if there is no value or p lies outside 0 to 1
 * @see Hyndman & Fan 1996, The American Statistician 50(4), 361-365
 */
export function sampleQuantile(values: Float64Array, p: number): number {
  if (!(p >= 0 && p <= 1)) throw new RangeError(`quantile probability must be 0 to 1, got ${p}`);
  if (values.length === 0) throw new RangeError('a quantile needs at least one value');
  const place = (values.length - 1) * p;
  const below = orderStatistic(values, 1 + Math.floor(place));
  const above = orderStatistic(values, 1 + Math.ceil(place));
  return below + (above - below) * (place - Math.floor(place));
}
