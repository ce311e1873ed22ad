import { describe, expect, it } from 'vitest';
import { accountMeasures } from '../../src/measures/account-measures.js';
import type { BankAccount } from '../../src/measures/bank-account.js';

const account: BankAccount = {
  visits: 3,
  inWh: 10_000,
  outWh: 8550,
  storedGainWh: 1000,
  wiringWh: 200,
  bleedWh: 50,
  equaliserAh: 40,
  equaliserCounterAh: 10,
  equaliserWh: 30,
  chargerOnlyS: 7300 * 60,
  damagedCells: 2,
  longestUnfilledS: 12.5 * 86_400,
  tripsToFull: 4,
  toFullAh: 55,
};

describe('measures of upkeep and energy', () => {
  it('are those of an account of 73 days', () => {
    // By hand: 73 days are a fifth of a year; 8550 Wh of the 9000 Wh that are no longer in the cells.
    expect(accountMeasures(account, 73 * 86_400)).toEqual({
      upkeep_visits: 3,
      upkeep_visits_per_year: 15,
      longest_without_full_charge: 12.5,
      trips_to_full_charge: 4,
      charge_to_full_charge: 55,
      cell_damaged: 1,
      damaged_cells: 2,
      charger_only: 100,
      energy_in: 10,
      energy_out: 8.55,
      energy_stored: 1,
      wiring_loss: 0.2,
      bleed_loss: 0.05,
      equaliser_charge: 40,
      equaliser_counter_charge: 10,
      equaliser_loss: 0.03,
      round_trip: 95,
    });
  });

  it('count energy out of the store as put in', () => {
    const { round_trip } = accountMeasures({ ...account, inWh: 0, outWh: 950, storedGainWh: -1000 }, 86_400);
    expect(round_trip).toBeCloseTo(95, 12);
  });

  it('have no round trip where nothing came out or nothing was spent', () => {
    expect(accountMeasures({ ...account, outWh: 0 }, 86_400).round_trip).toBeNull();
    expect(accountMeasures({ ...account, inWh: 500 }, 86_400).round_trip).toBeNull();
  });
});
