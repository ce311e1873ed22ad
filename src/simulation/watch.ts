import { BUS_OVERLOADED, overloadEnds } from '../bank/bus.js';
import { wrongSideV } from '../bank/conduction.js';
import { differenceV, isAtWork, OFF, pastEnablingV, pastRegionV } from '../bank/equaliser.js';
import type { BankEventKind } from '../bank/events.js';
import { updateChainModes } from '../bank/paths.js';
import {
  actOnProtection,
  actOnTime,
  clearIdleBridges,
  nextTimeS,
  PROTECTION_KINDS,
  protectionDelayS,
  protectionValuesInto,
  updateSleep,
} from '../bank/protection.js';
import type { Kernel } from './kernel.js';
import {
  actOnTerminal,
  REGIME,
  RESTART,
  TERMINAL_KINDS,
  type Terminal,
  terminalDelayS,
  terminalValue,
  updateTerms,
} from './terminal.js';

/** Amount by which a condition must be missed before it counts as no longer met, V or A. */
const HYSTERESIS = 1e-5;
/** Rectifiers and regimes have no clock; settling leaves them at most this far on the wrong side, V or A. */
const SETTLED = 1e-8;
/** Value of a condition that is not watched at present. */
const NEVER = -1;

/**
 * All conditions of a bank in one list: protection of module m at kind * modules + m, then the rectifier of each chain,
 * then the equalisers if there are any (as a whole, and each), then the bus. `met` says which hold; `dueS` when a condition that holds will have held for its time.
 */
export interface Watch {
  readonly value: Float64Array;
  /** Values at the start of the step. */
  readonly startValue: Float64Array;
  readonly met: Uint8Array;
  readonly dueS: Float64Array;
  /** When a condition that holds was met. */
  readonly sinceS: Float64Array;
  /** Earliest instant at which time alone makes something happen. */
  nextDueS: number;
  readonly firstChain: number;
  readonly firstTerminal: number;
  /** Conditions that have acted at the instant being settled. */
  readonly spent: Uint8Array;
}

export function createWatch(kernel: Kernel): Watch {
  const firstChain = PROTECTION_KINDS * kernel.bank.modules;
  const { equaliser } = kernel.bank;
  const firstTerminal = firstChain + kernel.emfShiftV.length + (equaliser === null ? 0 : 1 + equaliser.devices);
  const count = firstTerminal + TERMINAL_KINDS;
  return {
    value: new Float64Array(count),
    startValue: new Float64Array(count),
    met: new Uint8Array(count),
    dueS: new Float64Array(count).fill(Number.POSITIVE_INFINITY),
    sinceS: new Float64Array(count).fill(Number.POSITIVE_INFINITY),
    nextDueS: Number.POSITIVE_INFINITY,
    firstChain,
    firstTerminal,
    spent: new Uint8Array(count),
  };
}

/** Takes the values of all conditions at the latest evaluation, whose cell extremes are up to date. */
export function updateValues(
  kernel: Kernel,
  terminal: Terminal,
  watch: Watch,
  currentA: Float64Array,
  bankA: number,
  bankV: number,
): void {
  const { bank, state, bus, terms, point, highestV, lowestV } = kernel;
  const { value, firstChain, firstTerminal } = watch;
  protectionValuesInto(bank, state, highestV, lowestV, currentA, value);
  for (let i = 0; i < currentA.length; i++) {
    value[firstChain + i] = wrongSideV(bank, state, i, point.emfV[i], currentA[i]);
  }
  if (bank.equaliser !== null) updateEqualiserValues(kernel, watch, currentA, bankV);
  for (let kind = 0; kind < TERMINAL_KINDS; kind++) {
    value[firstTerminal + kind] = terminalValue(terminal, terms, bus, kind, bankA, bankV);
  }
  if (bus.regime === BUS_OVERLOADED) {
    const ends = overloadEnds(bank, state, kernel.cache, point.emfV, terms, bus);
    value[firstTerminal + REGIME] = ends ? 1 : -1;
  }
}

/** Equalisers have no clocks either: how far the bank voltage and each device are past where something changes. */
function updateEqualiserValues(
  { bank, state, point }: Kernel,
  { value, firstChain }: Watch,
  currentA: Float64Array,
  bankV: number,
): void {
  const { equaliser } = bank;
  if (equaliser === null) return;
  const first = firstChain + currentA.length;
  value[first] = pastEnablingV(equaliser, state, bankV);
  for (let k = 0; k < equaliser.devices; k++) {
    const works = state.equaliserOn[0] === 1 && isAtWork(equaliser, state.conduction, k);
    const region = state.equaliserRegion[k];
    value[first + 1 + k] = works
      ? pastRegionV(equaliser, region, differenceV(equaliser, point.emfV, currentA, k))
      : region === OFF
        ? NEVER
        : 0;
  }
}

/**
 * How far a condition is past the point where `met` must change; below 0 it need not.
 *
 * @param value of condition `at`
 */
export function pastChange(watch: Watch, at: number, value: number): number {
  if (at >= watch.firstChain && at <= watch.firstTerminal + REGIME) return value - SETTLED;
  return watch.met[at] === 1 ? -HYSTERESIS - value : value;
}

/** Turns a condition over; one newly met starts its clock. Rectifiers and regimes are settled instead. */
export function turnOver(kernel: Kernel, terminal: Terminal, watch: Watch, at: number): void {
  const { met, dueS, sinceS, firstChain, firstTerminal } = watch;
  if (at >= firstChain && at <= firstTerminal + REGIME) return;
  met[at] = 1 - met[at];
  if (met[at] === 0) {
    dueS[at] = Number.POSITIVE_INFINITY;
    sinceS[at] = Number.POSITIVE_INFINITY;
    return;
  }
  const { modules } = kernel.bank;
  const delayS =
    at < firstChain
      ? protectionDelayS(kernel.bank, kernel.state, Math.floor(at / modules), at % modules)
      : terminalDelayS(terminal, at - firstTerminal);
  sinceS[at] = kernel.nowS;
  dueS[at] = kernel.nowS + delayS;
}

/** Forgets what each condition has held for: all clocks start anew, as after work on the bank. */
export function stopClocks({ met, dueS, sinceS }: Watch): void {
  met.fill(0);
  dueS.fill(Number.POSITIVE_INFINITY);
  sinceS.fill(Number.POSITIVE_INFINITY);
}

/** Turns over every condition whose value asks for it. */
export function updateMet(kernel: Kernel, terminal: Terminal, watch: Watch): void {
  for (let at = 0; at < watch.met.length; at++) {
    if (pastChange(watch, at, watch.value[at]) >= 0) turnOver(kernel, terminal, watch, at);
  }
}

/** The first condition from `from` on that must be turned over, -1 if there is none. */
export function nextTurned(watch: Watch, from: number): number {
  const { value, met, firstChain, firstTerminal } = watch;
  for (let at = from; at < value.length; at++) {
    // Most conditions are neither met nor near: told apart without asking closer.
    if (value[at] < 0 && met[at] === 0) continue;
    if (at >= firstChain && at <= firstTerminal + REGIME && value[at] < SETTLED) continue;
    if (pastChange(watch, at, value[at]) >= 0) return at;
  }
  return -1;
}

/**
 * Lets everything happen whose time has come. A condition in `watch.spent` has acted at this instant already: each acts
 * at most once, so that a BMS without delays cannot switch for ever within no time.
 *
 * @returns true if the bus has to be settled again
 */
export function actOnDue(
  kernel: Kernel,
  terminal: Terminal,
  watch: Watch,
  report: (kind: BankEventKind, module: number) => void,
): boolean {
  const { bank, state, nowS, terms } = kernel;
  const { met, dueS, sinceS, firstChain, firstTerminal, spent } = watch;
  const { modules } = bank;
  let changed = false;
  for (let at = 0; at < met.length; at++) {
    if (dueS[at] > nowS || spent[at] === 1) continue;
    spent[at] = 1;
    met[at] = 0;
    dueS[at] = Number.POSITIVE_INFINITY;
    sinceS[at] = Number.POSITIVE_INFINITY;
    if (at < firstChain) {
      const m = at % modules;
      for (const kind of actOnProtection(bank, state, Math.floor(at / modules), m, nowS)) report(kind, m);
      changed = true;
    } else if (at >= firstTerminal) {
      for (const kind of actOnTerminal(terminal, at - firstTerminal)) {
        report(kind, -1);
        // What waited for the end of charge comes before a restart that the same instant may bring.
        if (kind === 'charge-ended') spent[firstTerminal + RESTART] = 1;
      }
      changed = true;
    }
  }
  for (let m = 0; m < modules; m++) {
    for (const kind of actOnTime(state, m, nowS)) {
      report(kind, m);
      changed = true;
    }
  }
  if (changed) {
    clearIdleBridges(bank, state);
    updateChainModes(bank, state);
    updateTerms(terminal, terms);
  }
  for (let m = 0; m < modules; m++) if (updateSleep(bank, state, m, nowS)) changed = true;
  return changed;
}

/** Sets the earliest instant at which time alone makes something happen. */
export function updateNextDue(kernel: Kernel, watch: Watch): void {
  let next = Number.POSITIVE_INFINITY;
  for (let at = 0; at < watch.dueS.length; at++) if (watch.dueS[at] < next) next = watch.dueS[at];
  for (let m = 0; m < kernel.bank.modules; m++) next = Math.min(next, nextTimeS(kernel.state, m));
  watch.nextDueS = next;
}
