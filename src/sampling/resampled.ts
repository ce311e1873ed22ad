import type { Deviation } from './deviation.js';

/**
 * Draws from measured values by the inverse of their empirical distribution function (definition 1 of Hyndman & Fan):
 *
 *   Q(u) = x_(ceil(n u)), x_(1) <= ... <= x_(n), and x_(1) for u = 0
 *
 * so that every draw is one of the values, each with the chance 1 / n; nothing lies between them.
 *
 * @param ascending values in ascending order, at least one, their mean 0
 * @throws RangeError if there is none
 * @see Hyndman & Fan 1996, The American Statistician 50(4), 361-365
 */
export function resampledFrom(ascending: readonly number[]): Deviation {
  const count = ascending.length;
  const [least, greatest] = [ascending[0], ascending[count - 1]];
  if (least === undefined || greatest === undefined) throw new RangeError('a resampled law needs at least one value');
  return {
    mean: 0,
    spreads: greatest > least,
    quantile: (u) => ascending[Math.max(0, Math.ceil(count * u) - 1)] ?? greatest,
    cdf: (x) => countUpTo(ascending, x) / count,
  };
}

/** Number of values at or below x, by halving. */
function countUpTo(ascending: readonly number[], x: number): number {
  let [from, to] = [0, ascending.length];
  while (from < to) {
    const middle = (from + to) >>> 1;
    if ((ascending[middle] ?? Number.POSITIVE_INFINITY) <= x) from = middle + 1;
    else to = middle;
  }
  return from;
}
