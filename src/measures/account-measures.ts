import type { BankAccount } from './bank-account.js';
import type { MeasureName } from './registry.js';

const DAY_S = 86_400;
const YEAR_S = 365 * DAY_S;

/** Measures of upkeep and energy. */
export type AccountNames = Extract<
  MeasureName,
  | `upkeep${string}`
  | `longest_without${string}`
  | `${string}_to_full_charge`
  | `${string}damaged${string}`
  | 'charger_only'
  | `energy_${'in' | 'out' | 'stored'}`
  | `${string}_loss`
  | `equaliser${string}`
  | 'round_trip'
>;

/** @param elapsedS length of the course, s */
export function accountMeasures(account: BankAccount, elapsedS: number): Record<AccountNames, number | null> {
  return {
    upkeep_visits: account.visits,
    upkeep_visits_per_year: (account.visits * YEAR_S) / elapsedS,
    longest_without_full_charge: account.longestUnfilledS / DAY_S,
    trips_to_full_charge: account.tripsToFull,
    charge_to_full_charge: account.toFullAh,
    cell_damaged: account.damagedCells > 0 ? 1 : 0,
    damaged_cells: account.damagedCells,
    charger_only: account.chargerOnlyS / 60 / (elapsedS / DAY_S),
    energy_in: account.inWh / 1000,
    energy_out: account.outWh / 1000,
    energy_stored: account.storedGainWh / 1000,
    wiring_loss: account.wiringWh / 1000,
    bleed_loss: account.bleedWh / 1000,
    equaliser_charge: account.equaliserAh,
    equaliser_counter_charge: account.equaliserCounterAh,
    equaliser_loss: account.equaliserWh / 1000,
    round_trip: roundTripPercent(account),
  };
}

/**
 * Round trip: energy out over the energy in that is no longer in the cells.
 *
 *   out / (in - gain of stored energy)
 *
 * @returns percent; null if nothing came out or all that went in is still there
 */
function roundTripPercent({ inWh, outWh, storedGainWh }: BankAccount): number | null {
  const spentWh = inWh - storedGainWh;
  return outWh > 0 && spentWh > 0 ? (100 * outWh) / spentWh : null;
}
