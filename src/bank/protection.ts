import type { Bank } from './bank.js';
import type { BankState } from './bank-state.js';
import type { BankEventKind } from './events.js';
import { chargePathOpen, dischargePathOpen } from './paths.js';

/**
 * The protection of one module as conditions that must hold for a time before something happens. A condition holds
 * while its value is at least 0; what it watches depends on the latches (trip while clear, release while latched).
 */
export const OVER_VOLTAGE = 0;
export const UNDER_VOLTAGE = 1;
export const OVER_CURRENT_CHARGE = 2;
export const OVER_CURRENT_DISCHARGE = 3;
export const RECLOSE = 4;
export const UNLOCK = 5;
export const PROTECTION_KINDS = 6;

/** Current from which a BMS takes a module to be charging or discharging, A (own choice). */
export const FLOW_A = 0.01;
/** Value of a condition that is not watched at present. */
const NEVER = -1;

/**
 * Values of all conditions of all modules, at kind * modules + m: volts or amperes beyond the threshold.
 *
 * @param highV largest cell voltage of each module, @param lowV smallest
 * @param chainA current of each chain, charging positive
 */
export function protectionValuesInto(
  bank: Bank,
  state: BankState,
  highV: Float64Array,
  lowV: Float64Array,
  chainA: Float64Array,
  value: Float64Array,
): void {
  const { modules, chainOfModule } = bank;
  const { overVoltage, underVoltage, overCurrentCharge, overCurrentDischarge, tooCold } = state;
  for (let m = 0; m < modules; m++) {
    const currentA = chainA[chainOfModule[m]];
    value[m] = overVoltage[m] === 1 ? bank.overVoltageReleaseV[m] - highV[m] : highV[m] - bank.overVoltageV[m];
    value[UNDER_VOLTAGE * modules + m] =
      underVoltage[m] === 1 ? recovery(bank, m, lowV[m], currentA) : bank.underVoltageV[m] - lowV[m];
    value[OVER_CURRENT_CHARGE * modules + m] =
      overCurrentCharge[m] === 1 ? NEVER : currentA - bank.overCurrentChargeA[m];
    value[OVER_CURRENT_DISCHARGE * modules + m] =
      overCurrentDischarge[m] === 1 ? NEVER : -currentA - bank.overCurrentDischargeA[m];
    const latches = overVoltage[m] + underVoltage[m] + overCurrentCharge[m] + overCurrentDischarge[m] + tooCold[m];
    const anyOpen = latches > 0;
    value[RECLOSE * modules + m] = anyOpen ? bridging(bank, state, m, currentA) : NEVER;
    value[UNLOCK * modules + m] = anyOpen ? unlocking(bank, state, m, currentA) : NEVER;
  }
}

/** Under-voltage release: the lowest cell above its release and, if the BMS asks for it, charge current. */
function recovery(bank: Bank, m: number, lowV: number, currentA: number): number {
  const recoveredV = lowV - bank.underVoltageReleaseV[m];
  return bank.underVoltageReleaseOnCharge[m] === 1 ? Math.min(recoveredV, currentA - FLOW_A) : recoveredV;
}

/** With exactly one path open: current the permitted way beyond the threshold; once bridged, that it has stopped. */
function bridging(bank: Bank, state: BankState, m: number, currentA: number): number {
  const noCharge = chargePathOpen(bank, state, m);
  if (noCharge === dischargePathOpen(bank, state, m)) return NEVER;
  const permittedA = noCharge ? -currentA : currentA;
  return state.reclosed[m] === 1 ? FLOW_A - permittedA : permittedA - bank.recloseA[m];
}

/** A lock that opposite current releases: that current. */
function unlocking(bank: Bank, state: BankState, m: number, currentA: number): number {
  if (bank.lockIsManual[m] === 1) return NEVER;
  if (state.lockedCharge[m] === 1) return -currentA - FLOW_A;
  return state.lockedDischarge[m] === 1 ? currentA - FLOW_A : NEVER;
}

/** Time for which a condition must hold without a break, s. */
export function protectionDelayS(bank: Bank, state: BankState, kind: number, m: number): number {
  const { bms } = bank.placed[m].parameters;
  switch (kind) {
    case OVER_VOLTAGE:
      return state.overVoltage[m] === 1 ? bms.overVoltageReleaseHoldS : bms.overVoltageDelayS;
    case UNDER_VOLTAGE:
      return state.underVoltage[m] === 1 ? bms.underVoltageReleaseHoldS : bms.underVoltageDelayS;
    case RECLOSE:
      return state.reclosed[m] === 1 ? 0 : bms.recloseDelayS;
    case UNLOCK:
      return 0;
    default:
      return bms.overCurrent.delayS;
  }
}

/**
 * Does what a condition leads to once it has held for its time.
 *
 * @returns what happened, in order
 */
export function actOnProtection(bank: Bank, state: BankState, kind: number, m: number, nowS: number): BankEventKind[] {
  switch (kind) {
    case OVER_VOLTAGE:
      state.overVoltage[m] = 1 - state.overVoltage[m];
      return [state.overVoltage[m] === 1 ? 'over-voltage-trip' : 'over-voltage-release'];
    case UNDER_VOLTAGE:
      state.underVoltage[m] = 1 - state.underVoltage[m];
      return [state.underVoltage[m] === 1 ? 'under-voltage-trip' : 'under-voltage-release'];
    case OVER_CURRENT_CHARGE:
      state.overCurrentCharge[m] = 1;
      return ['over-current-charge-trip', ...planRetry(bank, state, m, 0, nowS)];
    case OVER_CURRENT_DISCHARGE:
      state.overCurrentDischarge[m] = 1;
      return ['over-current-discharge-trip', ...planRetry(bank, state, m, 1, nowS)];
    case RECLOSE:
      state.reclosed[m] = 1 - state.reclosed[m];
      return [];
    default:
      if (state.lockedCharge[m] === 1) state.lockedCharge[m] = state.overCurrentCharge[m] = 0;
      else state.lockedDischarge[m] = state.overCurrentDischarge[m] = 0;
      return ['over-current-unlock'];
  }
}

/** After an over-current trip: another try after a while, or a lock if there were too many trips lately. */
function planRetry(bank: Bank, state: BankState, m: number, direction: 0 | 1, nowS: number): BankEventKind[] {
  const { retryS, lockAfterTrips, lockWindowS } = bank.placed[m].parameters.bms.overCurrent;
  const retryAtS = direction === 0 ? state.retryChargeS : state.retryDischargeS;
  const trips = state.recentTripsS[2 * m + direction];
  while (trips.length > 0 && trips[0] <= nowS - lockWindowS) trips.shift();
  trips.push(nowS);
  if (lockAfterTrips !== null && trips.length >= lockAfterTrips) {
    (direction === 0 ? state.lockedCharge : state.lockedDischarge)[m] = 1;
    trips.length = 0;
    return ['over-current-lock'];
  }
  retryAtS[m] = nowS + retryS;
  return [];
}

/** Closes the over-current paths of module `m` whose time for another try has come. */
export function actOnTime(state: BankState, m: number, nowS: number): BankEventKind[] {
  const done: BankEventKind[] = [];
  if (state.retryChargeS[m] <= nowS) {
    state.retryChargeS[m] = Number.POSITIVE_INFINITY;
    state.overCurrentCharge[m] = 0;
    done.push('over-current-retry');
  }
  if (state.retryDischargeS[m] <= nowS) {
    state.retryDischargeS[m] = Number.POSITIVE_INFINITY;
    state.overCurrentDischarge[m] = 0;
    done.push('over-current-retry');
  }
  return done;
}

/**
 * Starts or stops the clock after which a BMS with an open discharge path falls asleep.
 *
 * @returns true if the standby current of the module has changed
 */
export function updateSleep(bank: Bank, state: BankState, m: number, nowS: number): boolean {
  const before = state.asleep[m];
  if (!dischargePathOpen(bank, state, m)) {
    state.sleepAtS[m] = Number.POSITIVE_INFINITY;
    state.asleep[m] = 0;
  } else if (state.sleepAtS[m] === Number.POSITIVE_INFINITY && before === 0) {
    state.sleepAtS[m] = nowS + bank.placed[m].parameters.bms.asleepAfterS;
  } else if (state.sleepAtS[m] <= nowS) {
    state.sleepAtS[m] = Number.POSITIVE_INFINITY;
    state.asleep[m] = 1;
  }
  return state.asleep[m] !== before;
}

/** Next instant at which time alone does something to module `m`, s. */
export function nextTimeS(state: BankState, m: number): number {
  return Math.min(state.retryChargeS[m], state.retryDischargeS[m], state.sleepAtS[m]);
}

/** A drop can be bridged only while exactly one path is open: forgets bridges that no longer apply. */
export function clearIdleBridges(bank: Bank, state: BankState): void {
  for (let m = 0; m < bank.modules; m++) {
    if (chargePathOpen(bank, state, m) === dischargePathOpen(bank, state, m)) state.reclosed[m] = 0;
  }
}
