import type { Bank } from './bank.js';

/** How current may pass a chain. */
export const BOTH_WAYS = 0;
export const DISCHARGE_ONLY = 1;
export const CHARGE_ONLY = 2;
export const NO_WAY = 3;

/**
 * Everything about a bank that time changes, as flat arrays; numbering as in `Bank`.
 *
 * Flags are 0 or 1. Times are seconds since the bank was put together; `Infinity` means never.
 */
export interface BankState {
  // Cells.
  /** Charge fraction; may leave 0..1. */
  readonly charge: Float64Array;
  /** Hysteresis state, -1 (discharged to here) to 1. */
  readonly hysteresis: Float64Array;
  readonly bleeding: Uint8Array;
  /** Standby and bleed current of a cell seen through each time constant (pair * cells + cell), A. */
  readonly offsetFilterA: Float64Array;
  // Modules.
  readonly overVoltage: Uint8Array;
  readonly underVoltage: Uint8Array;
  readonly overCurrentCharge: Uint8Array;
  readonly overCurrentDischarge: Uint8Array;
  /** The BMS refuses charge current because the module is cold. */
  readonly tooCold: Uint8Array;
  /** The over-current of that direction will not be tried again by itself. */
  readonly lockedCharge: Uint8Array;
  readonly lockedDischarge: Uint8Array;
  readonly retryChargeS: Float64Array;
  readonly retryDischargeS: Float64Array;
  /** Times of the latest over-current trips, for the lock: per module and direction, oldest first. */
  readonly recentTripsS: number[][];
  /** The forward drop is bridged. */
  readonly reclosed: Uint8Array;
  readonly asleep: Uint8Array;
  readonly sleepAtS: Float64Array;
  // Chains.
  /** Chain current seen through each time constant (pair * chains + chain), A. */
  readonly filterA: Float64Array;
  /** BOTH_WAYS, DISCHARGE_ONLY, CHARGE_ONLY or NO_WAY. */
  readonly chainMode: Uint8Array;
  /** Sum of forward drops in the permitted direction, V. */
  readonly chainDropV: Float64Array;
  /** CLOSED, FORWARD or LEAKING (network.ts). */
  readonly conduction: Uint8Array;
  // Equalisers.
  /** Region of the law in which each device stands (equaliser.ts). */
  readonly equaliserRegion: Int8Array;
  /** The bank voltage has the devices work: one flag for all. */
  readonly equaliserOn: Uint8Array;
}

/** A bank as received: cells at their arrival charge, rested, every path closed. */
export function createBankState(bank: Bank): BankState {
  const { cells, modules } = bank;
  const chains = bank.wiring.chains.length;
  const pairs = bank.timeConstantS.length;
  return {
    charge: Float64Array.from(bank.arrivalCharge),
    hysteresis: new Float64Array(cells),
    bleeding: new Uint8Array(cells),
    offsetFilterA: new Float64Array(pairs * cells),
    overVoltage: new Uint8Array(modules),
    underVoltage: new Uint8Array(modules),
    overCurrentCharge: new Uint8Array(modules),
    overCurrentDischarge: new Uint8Array(modules),
    tooCold: new Uint8Array(modules),
    lockedCharge: new Uint8Array(modules),
    lockedDischarge: new Uint8Array(modules),
    retryChargeS: new Float64Array(modules).fill(Number.POSITIVE_INFINITY),
    retryDischargeS: new Float64Array(modules).fill(Number.POSITIVE_INFINITY),
    recentTripsS: Array.from({ length: 2 * modules }, () => []),
    reclosed: new Uint8Array(modules),
    asleep: new Uint8Array(modules),
    sleepAtS: new Float64Array(modules).fill(Number.POSITIVE_INFINITY),
    filterA: new Float64Array(pairs * chains),
    chainMode: new Uint8Array(chains),
    chainDropV: new Float64Array(chains),
    conduction: new Uint8Array(chains),
    equaliserRegion: new Int8Array(bank.equaliser?.devices ?? 0),
    equaliserOn: new Uint8Array(1),
  };
}

/** An independent copy, for tests of capacity on a bank that goes on afterwards. */
export function copyBankState(bank: Bank, state: BankState): BankState {
  // Filled into a new state rather than cloned: objects of one make keep the stepper fast.
  const copy = createBankState(bank);
  copy.charge.set(state.charge);
  copy.hysteresis.set(state.hysteresis);
  copy.bleeding.set(state.bleeding);
  copy.offsetFilterA.set(state.offsetFilterA);
  copy.overVoltage.set(state.overVoltage);
  copy.underVoltage.set(state.underVoltage);
  copy.overCurrentCharge.set(state.overCurrentCharge);
  copy.overCurrentDischarge.set(state.overCurrentDischarge);
  copy.tooCold.set(state.tooCold);
  copy.lockedCharge.set(state.lockedCharge);
  copy.lockedDischarge.set(state.lockedDischarge);
  copy.retryChargeS.set(state.retryChargeS);
  copy.retryDischargeS.set(state.retryDischargeS);
  state.recentTripsS.forEach((trips, k) => {
    copy.recentTripsS[k].push(...trips);
  });
  copy.reclosed.set(state.reclosed);
  copy.asleep.set(state.asleep);
  copy.sleepAtS.set(state.sleepAtS);
  copy.filterA.set(state.filterA);
  copy.chainMode.set(state.chainMode);
  copy.chainDropV.set(state.chainDropV);
  copy.conduction.set(state.conduction);
  copy.equaliserRegion.set(state.equaliserRegion);
  copy.equaliserOn.set(state.equaliserOn);
  return copy;
}
