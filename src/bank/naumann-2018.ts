import { arrheniusFactor } from './temperature.js';

/** Power of time in Naumann's law of calendar ageing. */
export const CALENDAR_EXPONENT = 0.5;

/** Activation energy, J/mol. */
const CALENDAR_J_PER_MOL = 17_126;

/**
 * Factor of calendar fade of a LiFePO4 cell.
 *
 *   f = 1.2571e-5 exp(-17126 / R (1/T - 1/298.15 K)) (2.8575 (z - 0.5)^3 + 0.60225) t^0.5,   t in s
 *
 * @param charge mean charge fraction z; what lies beyond 0 or 1 counts as that end
 * @returns fraction of capacity per s^0.5
 * @see Naumann et al. 2018, J. Energy Storage 17, 153-169
 */
export function calendarFactor(temperatureK: number, charge: number): number {
  const fromMiddle = Math.min(1, Math.max(0, charge)) - 0.5;
  return 1.2571e-5 * arrheniusFactor(CALENDAR_J_PER_MOL, temperatureK) * (2.8575 * fromMiddle ** 3 + 0.60225);
}
