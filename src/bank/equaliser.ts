import type { EqualiserSettings } from '../study/study.js';
import type { BankState } from './bank-state.js';
import type { ChainedWiring } from './chains.js';
import { CLOSED } from './network.js';

/**
 * Equalisers of a bank: one device between neighbouring modules of every string, at their posts. It takes a current i from
 * the module of higher terminal voltage and delivers its share eta i to the other:
 *
 *   d = V_upper - V_lower,   i = 0 for |d| <= start,   g (|d| - start) up to the greatest current at |d| = full
 *   lower module: + eta i, upper module: - i   where d > 0; the other way round where d < 0
 *
 * Proportional (own choice): a source that is either on or off would switch without end, since the difference falls by
 * I R as it starts. The share is one of charge, so that the law is linear; of power it is eta V_to / V_from.
 *
 * A device rests, its standby included, unless both of its modules have both paths closed (own choice).
 */
export interface BankEqualiser {
  readonly settings: EqualiserSettings;
  readonly devices: number;
  /** Chain, which is one module, below and above each device. */
  readonly lower: Int32Array;
  readonly upper: Int32Array;
  /** Resistance of each module between its posts, without leads. */
  readonly moduleOhm: Float64Array;
  /** g, S. */
  readonly perVolt: number;
  /** Bank voltage below which devices stop again. */
  readonly disableV: number;
}

/** Where a device stands on its law, the sign being that of the difference. */
export const OFF = 0;
const PROPORTIONAL = 1;
export const AT_LIMIT = 2;

/** Fall of bank voltage below the enabling one at which devices stop, V per cell in series (own choice). */
const DISABLE_BELOW_V = 0.025;
/** Voltage by which a device must be beyond the end of its region before it is moved to the next. */
const SLACK_V = 1e-9;

/** Resistance of each module between its posts, where every module is a chain of its own. */
export function moduleOhm({ chains }: ChainedWiring, chainOhm: Float64Array): Float64Array {
  return Float64Array.from(chainOhm, (ohm, i) => ohm - chains[i].ohm);
}

/**
 * @param cellsInSeries of the whole bank
 * @param ofModulesOhm from `moduleOhm`
 */
export function placeEqualisers(
  settings: EqualiserSettings,
  strings: number,
  positions: number,
  cellsInSeries: number,
  ofModulesOhm: Float64Array,
): BankEqualiser | null {
  if (positions < 2) return null;
  const lower: number[] = [];
  for (let string = 0; string < strings; string++) {
    for (let position = 0; position + 1 < positions; position++) lower.push(string * positions + position);
  }
  return {
    settings,
    devices: lower.length,
    lower: Int32Array.from(lower),
    upper: Int32Array.from(lower, (m) => m + 1),
    moduleOhm: ofModulesOhm,
    perVolt: settings.currentA / (settings.fullV - settings.startV),
    disableV: (settings.enableV ?? 0) - DISABLE_BELOW_V * cellsInSeries,
  };
}

/** Both modules of device `k` have both paths closed. */
export function isAtWork({ lower, upper }: BankEqualiser, conduction: Uint8Array, k: number): boolean {
  return conduction[lower[k]] === CLOSED && conduction[upper[k]] === CLOSED;
}

/** Upper less lower terminal voltage of the modules of device `k`, V. */
export function differenceV(
  { lower, upper, moduleOhm }: BankEqualiser,
  emfV: Float64Array,
  currentA: Float64Array,
  k: number,
): number {
  const [a, b] = [lower[k], upper[k]];
  return emfV[b] + moduleOhm[b] * currentA[b] - (emfV[a] + moduleOhm[a] * currentA[a]);
}

/** Current taken by a device in region `region` at difference `atV`, A; negative where the lower module gives. */
export function deviceCurrentA({ settings, perVolt }: BankEqualiser, region: number, atV: number): number {
  if (region === OFF) return 0;
  const sign = Math.sign(region);
  return Math.abs(region) === AT_LIMIT ? sign * settings.currentA : perVolt * (atV - sign * settings.startV);
}

/** How far a device is beyond the end of its region, V: above 0 it belongs into another. */
export function pastRegionV({ settings }: BankEqualiser, region: number, atV: number): number {
  const along = region < 0 ? -atV : atV;
  switch (Math.abs(region)) {
    case OFF:
      return Math.abs(atV) - settings.startV;
    case PROPORTIONAL:
      return Math.max(along - settings.fullV, settings.startV - along);
    default:
      return settings.fullV - along;
  }
}

/** How far the bank voltage is past the point at which devices start or stop, V. */
export function pastEnablingV({ settings, disableV }: BankEqualiser, state: BankState, bankV: number): number {
  if (settings.enableV === null) return state.equaliserOn[0] === 1 ? Number.NEGATIVE_INFINITY : 0;
  return state.equaliserOn[0] === 1 ? disableV - bankV : bankV - settings.enableV;
}

/**
 * Moves the first device that is beyond the end of its region to the next one.
 *
 * @param mayStart devices may be started or stopped as a whole as well
 * @returns true if anything changed: the bus has to be settled again
 */
export function settleEqualiser(
  equaliser: BankEqualiser,
  state: BankState,
  emfV: Float64Array,
  currentA: Float64Array,
  bankV: number,
  mayStart: boolean,
): boolean {
  const { equaliserOn, equaliserRegion, conduction } = state;
  if (mayStart && pastEnablingV(equaliser, state, bankV) >= 0) {
    equaliserOn[0] = 1 - equaliserOn[0];
    return true;
  }
  for (let k = 0; k < equaliser.devices; k++) {
    const region = equaliserRegion[k];
    if (equaliserOn[0] === 0 || !isAtWork(equaliser, conduction, k)) {
      if (region === OFF) continue;
      equaliserRegion[k] = OFF;
      return true;
    }
    const atV = differenceV(equaliser, emfV, currentA, k);
    if (pastRegionV(equaliser, region, atV) <= SLACK_V) continue;
    equaliserRegion[k] = nextRegion(equaliser, region, atV);
    return true;
  }
  return false;
}

function nextRegion({ settings }: BankEqualiser, region: number, atV: number): number {
  if (region === OFF) return Math.sign(atV) * PROPORTIONAL;
  const sign = Math.sign(region);
  if (Math.abs(region) === AT_LIMIT) return sign * PROPORTIONAL;
  return sign * atV > settings.fullV ? sign * AT_LIMIT : OFF;
}

/**
 * Current that the devices drive into each module at an evaluation of the bank, beside that of its leads, A.
 *
 * @param intoA overwritten
 */
export function equaliserSourcesInto(
  equaliser: BankEqualiser,
  state: BankState,
  emfV: Float64Array,
  currentA: Float64Array,
  intoA: Float64Array,
): void {
  const { settings, lower, upper } = equaliser;
  intoA.fill(0);
  for (let k = 0; k < equaliser.devices; k++) {
    if (!isAtWork(equaliser, state.conduction, k)) continue;
    const region = state.equaliserRegion[k];
    const amps = deviceCurrentA(equaliser, region, differenceV(equaliser, emfV, currentA, k));
    intoA[lower[k]] += (region < 0 ? 1 : settings.efficiency) * amps - settings.standbyA;
    intoA[upper[k]] -= (region < 0 ? settings.efficiency : 1) * amps + settings.standbyA;
  }
}
