import { NotConverged } from '../mathematics/not-converged.js';
import type { Bank } from './bank.js';
import { type BankState, BOTH_WAYS, DISCHARGE_ONLY, NO_WAY } from './bank-state.js';
import { equalisedMap } from './equalised-map.js';
import { CLOSED, FORWARD, LEAK_S, LEAKING, type NetworkMap, solveNetwork } from './network.js';

/** Maps of the patterns met lately; a bank runs through few of them again and again. */
export interface NetworkCache {
  readonly maps: Map<number, NetworkMap>;
  /** Maps with equalisers, by pattern and regions. */
  readonly equalised: Map<string, NetworkMap>;
  /** Room for the EMFs by which the chains enter the network. */
  readonly effectiveV: Float64Array;
}

const MOST_MAPS = 64;
/** Three states for each of so many chains make a key below 2^53. */
const MOST_CHAINS = 32;
/** Voltage by which a rectifier must be on the wrong side before it is switched: far below any voltage that matters. */
export const SLACK_V = 1e-9;
/**
 * Voltage beyond its drop at which a leaking rectifier begins to conduct, V. Nodes that hang on leaks alone are known to
 * about a microvolt: without this band, rounding could call either state of a rectifier at its threshold the wrong one.
 */
export const DEAD_BAND_V = 1e-5;

export function createNetworkCache(): NetworkCache {
  return { maps: new Map(), equalised: new Map(), effectiveV: new Float64Array(MOST_CHAINS) };
}

/** The map of the present conduction pattern, solved at most once while it stays in the cache. */
export function networkMap(bank: Bank, conduction: Uint8Array, cache: NetworkCache): NetworkMap {
  let key = 0;
  for (let i = 0; i < conduction.length; i++) key = key * 3 + conduction[i];
  let map = cache.maps.get(key);
  if (map === undefined) {
    if (cache.maps.size >= MOST_MAPS) cache.maps.clear();
    map = solveNetwork(bank.wiring, bank.chainOhm, conduction);
    cache.maps.set(key, map);
  }
  return map;
}

/** The map of the present pattern and of the present regions of equalisers. */
export function presentMap(bank: Bank, state: BankState, cache: NetworkCache): NetworkMap {
  const map = networkMap(bank, state.conduction, cache);
  if (bank.equaliser === null) return map;
  const key = `${state.conduction.join('')},${state.equaliserRegion.join(',')}`;
  let equalised = cache.equalised.get(key);
  if (equalised === undefined) {
    if (cache.equalised.size >= MOST_MAPS) cache.equalised.clear();
    equalised = equalisedMap(bank.equaliser, state, map);
    cache.equalised.set(key, equalised);
  }
  return equalised;
}

/**
 * EMF by which a chain enters the network in its present state, V.
 *
 * A conducting rectifier drops a fixed voltage against the current; with its leak beside it this is the Thevenin EMF
 * (g (E -+ drop) + leak E) / (g + leak).
 */
export function effectiveEmfV(bank: Bank, state: BankState, i: number, emfV: number): number {
  if (state.conduction[i] !== FORWARD) return emfV;
  const shift = state.chainDropV[i] / (1 + LEAK_S * bank.chainOhm[i]);
  return state.chainMode[i] === DISCHARGE_ONLY ? emfV - shift : emfV + shift;
}

/**
 * How far chain `i` is from having to switch, V: above 0 it stands on the wrong side of its rectifier.
 *
 * Complementarity of a rectifier: it conducts and its current has the permitted sign, or it leaks and the voltage across
 * it is not beyond the drop. Both are one voltage: v - (E -+ drop), taken positive against conduction.
 */
export function wrongSideV(bank: Bank, state: BankState, i: number, emfV: number, currentA: number): number {
  const mode = state.chainMode[i];
  if (mode === BOTH_WAYS || mode === NO_WAY) return Number.NEGATIVE_INFINITY;
  const dropV = state.chainDropV[i];
  const thresholdV = mode === DISCHARGE_ONLY ? emfV - dropV : emfV + dropV;
  const conducting = state.conduction[i] === FORWARD;
  const conductance = conducting ? 1 / bank.chainOhm[i] + LEAK_S : LEAK_S;
  const terminalV = effectiveEmfV(bank, state, i, emfV) + currentA / conductance;
  const against = mode === DISCHARGE_ONLY ? terminalV - thresholdV : thresholdV - terminalV;
  return conducting ? against : -against - DEAD_BAND_V;
}

/** Sets the conduction of chains that have no choice; rectifiers keep theirs. */
export function fixConduction(state: BankState): void {
  for (let i = 0; i < state.conduction.length; i++) {
    const mode = state.chainMode[i];
    if (mode === BOTH_WAYS) state.conduction[i] = CLOSED;
    else if (mode === NO_WAY) state.conduction[i] = LEAKING;
    else if (state.conduction[i] === CLOSED) state.conduction[i] = FORWARD;
  }
}

/** A network with its currents at one instant. */
export interface ConductionPoint {
  map: NetworkMap;
  readonly currentA: Float64Array;
  bankA: number;
  bankV: number;
}

/**
 * Finds which rectifiers conduct with the bank current given, or with the bank voltage given.
 *
 * The conditions are a linear complementarity problem whose matrix is positive definite, hence with exactly one
 * solution; switching always the wrong rectifier of least number reaches it in finitely many steps from any start.
 *
 * @param fixed the bank current in A (`atVoltage` false) or the bank voltage in V (`atVoltage` true)
 * @throws RangeError if it does not end, which a positive definite matrix rules out
 * @see Murty 1974, Linear Algebra and its Applications 9, 273-278 (least-index rule, *from memory*)
 */
export function settleConduction(
  bank: Bank,
  state: BankState,
  cache: NetworkCache,
  emfV: Float64Array,
  fixed: number,
  atVoltage: boolean,
  point: ConductionPoint,
): void {
  const limit = 1000 * state.conduction.length;
  for (let pivot = 0; pivot <= limit; pivot++) {
    currentsInto(bank, state, cache, emfV, fixed, atVoltage, point);
    let wrong = -1;
    for (let i = 0; i < state.conduction.length && wrong < 0; i++) {
      if (wrongSideV(bank, state, i, emfV[i], point.currentA[i]) > SLACK_V) wrong = i;
    }
    if (wrong < 0) return;
    state.conduction[wrong] = state.conduction[wrong] === FORWARD ? LEAKING : FORWARD;
  }
  throw new NotConverged(`conduction of ${state.conduction.length} chains did not settle`);
}

/** Currents and bank voltage of the present pattern, without asking whether its rectifiers stand right. */
export function currentsInto(
  bank: Bank,
  state: BankState,
  cache: NetworkCache,
  emfV: Float64Array,
  fixed: number,
  atVoltage: boolean,
  point: ConductionPoint,
): void {
  const map = presentMap(bank, state, cache);
  const count = map.chains;
  const { effectiveV } = cache;
  const { currentPerEmf, currentPerBank, voltagePerEmf, offsetA } = map;
  let openV = map.openOffsetV;
  for (let i = 0; i < count; i++) {
    effectiveV[i] = effectiveEmfV(bank, state, i, emfV[i]);
    openV += voltagePerEmf[i] * effectiveV[i];
  }
  const bankA = atVoltage ? (fixed - openV) / map.bankOhm : fixed;
  for (let i = 0; i < count; i++) {
    let sum = currentPerBank[i] * bankA;
    for (let j = 0; j < count; j++) sum += currentPerEmf[i * count + j] * effectiveV[j];
    point.currentA[i] = offsetA === null ? sum : sum + offsetA[i];
  }
  point.map = map;
  point.bankA = bankA;
  point.bankV = openV + map.bankOhm * bankA;
}
