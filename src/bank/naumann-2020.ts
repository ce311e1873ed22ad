/** Power of equivalent full cycles in Naumann's law of cycle ageing. */
export const CYCLE_EXPONENT = 0.5;

/**
 * Factor of cycle fade of a LiFePO4 cell, which adds to calendar fade.
 *
 *   f = 0.01 (0.0630 C + 0.0971) (4.0253 (D - 0.6)^3 + 1.0923) N^0.5,   N: equivalent full cycles
 *
 * Temperature does not enter.
 *
 * @param ratePerH C: current over capacity, 1/h
 * @param depth D: depth of the cycle, fraction; above 1 counts as 1
 * @returns fraction of capacity per cycle^0.5
 * @see Naumann et al. 2020, J. Power Sources 451, 227666
 */
export function cycleFactor(ratePerH: number, depth: number): number {
  return 0.01 * (0.063 * ratePerH + 0.0971) * (4.0253 * (Math.min(1, depth) - 0.6) ** 3 + 1.0923);
}
