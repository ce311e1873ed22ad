import { invertCdf } from '../mathematics/invert-cdf.js';
import type { Deviation } from './deviation.js';

/** A part of a mixture ready to be drawn. */
interface MixedDeviation {
  readonly weight: number;
  /** Where the middle of the part lies. */
  readonly at: number;
  readonly deviation: Deviation;
}

/**
 * Mixture of deviations by one uniform number: the inverse of the mixed distribution function
 *
 *   F(x) = sum_k w_k F_k(x - at_k)
 *
 * moved so that its mean is 0, then `factor` times as wide. The inverse at u lies between the least and the greatest
 * quantile of the parts at u, and is found there by halving down to neighbouring numbers.
 *
 * @param parts at least one, their weights summing to 1
 */
export function mixtureOf(parts: readonly MixedDeviation[], factor: number): Deviation {
  const mean = parts.reduce((sum, { weight, at, deviation }) => sum + weight * (at + deviation.mean), 0);
  const mixed = (x: number): number => {
    let share = 0;
    for (const { weight, at, deviation } of parts) share += weight * deviation.cdf(x - at);
    return share;
  };
  const quantile = (u: number): number => {
    let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
    for (const { at, deviation } of parts) {
      const own = at + deviation.quantile(u);
      low = Math.min(low, own);
      high = Math.max(high, own);
    }
    return invertCdf(mixed, u, low, high);
  };
  return {
    mean: 0,
    spreads: parts.some(({ at, deviation }) => deviation.spreads || at !== parts[0]?.at),
    quantile: (u) => factor * (quantile(u) - mean),
    cdf: (x) => mixed(mean + x / factor),
  };
}
