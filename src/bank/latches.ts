import type { Bank } from './bank.js';
import type { BankState } from './bank-state.js';

/** What a person at the bank does to every BMS: clears latches, locks and retries, and wakes what has fallen asleep. */
export function clearLatches(bank: Bank, state: BankState): void {
  for (const flags of [
    state.overVoltage,
    state.underVoltage,
    state.overCurrentCharge,
    state.overCurrentDischarge,
    state.lockedCharge,
    state.lockedDischarge,
    state.reclosed,
    state.asleep,
  ]) {
    flags.fill(0);
  }
  for (const timesS of [state.retryChargeS, state.retryDischargeS, state.sleepAtS]) {
    timesS.fill(Number.POSITIVE_INFINITY);
  }
  for (let k = 0; k < 2 * bank.modules; k++) state.recentTripsS[k].length = 0;
}
