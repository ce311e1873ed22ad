/**
 * Quantile of a sorted sample, linear between neighbouring values (definition 7, the default of R and NumPy).
 *
 * @param ascending finite values in ascending order, at least one
 * @param p probability, 0 to 1
 * @returns in the unit of `ascending`
 * @throws RangeError if there is no value or p lies outside 0 to 1
 * @see Hyndman & Fan 1996, The American Statistician 50(4), 361-365
 */
export function quantileOfSorted(ascending: Float64Array, p: number): number {
  if (!(p >= 0 && p <= 1)) throw new RangeError(`quantile probability must be 0 to 1, got ${p}`);
  const place = (ascending.length - 1) * p;
  const below = ascending[Math.floor(place)];
  const above = ascending[Math.ceil(place)];
  if (below === undefined || above === undefined) throw new RangeError('a quantile needs at least one value');
  return below + (above - below) * (place - Math.floor(place));
}
