import type { Bank } from './bank.js';
import { type BankState, BOTH_WAYS, CHARGE_ONLY, DISCHARGE_ONLY, NO_WAY } from './bank-state.js';

/** The charge path of module `m` is open, for whatever reason. */
export function chargePathOpen(bank: Bank, state: BankState, m: number): boolean {
  if (state.overVoltage[m] === 1 || state.overCurrentCharge[m] === 1 || state.tooCold[m] === 1) return true;
  return state.overCurrentDischarge[m] === 1 && bank.overCurrentOpensBoth[m] === 1;
}

/** The discharge path of module `m` is open, for whatever reason. */
export function dischargePathOpen(bank: Bank, state: BankState, m: number): boolean {
  if (state.underVoltage[m] === 1 || state.overCurrentDischarge[m] === 1) return true;
  return state.overCurrentCharge[m] === 1 && bank.overCurrentOpensBoth[m] === 1;
}

/** The way current may pass module `m`. */
export function moduleMode(bank: Bank, state: BankState, m: number): number {
  const noCharge = chargePathOpen(bank, state, m);
  const noDischarge = dischargePathOpen(bank, state, m);
  if (noCharge) return noDischarge ? NO_WAY : DISCHARGE_ONLY;
  return noDischarge ? CHARGE_ONLY : BOTH_WAYS;
}

/**
 * Derives the way of every chain from the paths of its modules: a direction passes if it passes every module, and each
 * module whose other path is open adds its forward drop unless it is bridged.
 */
export function updateChainModes(bank: Bank, state: BankState): void {
  bank.wiring.chains.forEach((chain, i) => {
    let noCharge = false;
    let noDischarge = false;
    let dropV = 0;
    for (const m of chain.modules) {
      const mode = moduleMode(bank, state, m);
      if (mode === NO_WAY || mode === DISCHARGE_ONLY) noCharge = true;
      if (mode === NO_WAY || mode === CHARGE_ONLY) noDischarge = true;
      if (mode !== BOTH_WAYS && state.reclosed[m] === 0) dropV += bank.forwardDropV[m];
    }
    state.chainMode[i] = noCharge ? (noDischarge ? NO_WAY : DISCHARGE_ONLY) : noDischarge ? CHARGE_ONLY : BOTH_WAYS;
    state.chainDropV[i] = dropV;
  });
}
