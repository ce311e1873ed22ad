import type { Bank } from './bank.js';
import { type BankState, BOTH_WAYS, NO_WAY } from './bank-state.js';
import {
  type ConductionPoint,
  currentsInto,
  DEAD_BAND_V,
  effectiveEmfV,
  type NetworkCache,
  presentMap,
  SLACK_V,
  settleConduction,
  wrongSideV,
} from './conduction.js';
import { LEAKING } from './network.js';
import { FLOW_A } from './protection.js';

/** The charger gives nothing; the load alone sets the bus. */
export const CHARGER_IDLE = 0;
/** The charger gives all the power there is. */
export const CHARGER_AT_POWER = 1;
/** The charger gives its current limit. */
export const CHARGER_AT_LIMIT = 2;
/** The charger holds its ceiling voltage. */
export const CHARGER_HOLDS = 3;
/** Nothing can carry the load and nothing conducts: the bus is at 0 V. */
export const BUS_DEAD = 4;
/** The load asks for more than the bank can give at any voltage: it has gone off and the bank rests. */
export const BUS_OVERLOADED = 5;

/** What stands at the bus: demand and charger over a stretch of time. */
export interface BusTerms {
  /** Power and current drawn by the load, 0 or more; 0 while it is disconnected. */
  loadW: number;
  loadA: number;
  /** Charging power on offer, W; `Infinity` = bounded by the limit alone; 0 = no charging. */
  chargeW: number;
  limitA: number;
  /** Voltage that the charger does not exceed; null = the charger is off. */
  ceilingV: number | null;
}

/** Bus voltages below this are no supply, V. */
const FLOOR_V = 1;
/** Change of a rectifier's condition per volt of bus voltage below which the bus does not switch it. */
const LEAST_PER_VOLT = 1e-11;
/** Share by which the bounds of two regimes overlap, so that a root between them is not lost to rounding. */
const ROUNDING = 1e-9;
/** Share of the discriminant that must be to spare before an overloaded bus is tried again. */
const OVERLOAD_MARGIN = 0.02;

/** Regime and net terms of the bus: I_bank = netA + netW / V unless a voltage is held. */
export interface BusPoint extends ConductionPoint {
  regime: number;
  netA: number;
  netW: number;
  /** The charger gives current, or a chain conducts: otherwise the bus floats. */
  fed: boolean;
}

/** Current that the load draws at a bus voltage, A. */
export function loadCurrentA(terms: BusTerms, busV: number): number {
  return terms.loadA + (terms.loadW > 0 ? terms.loadW / busV : 0);
}

/** Largest current that the charger can give at a bus voltage, A. */
export function chargerCurrentA(terms: BusTerms, busV: number): number {
  return Math.min(terms.limitA, terms.chargeW / busV);
}

/**
 * Upper root of the bus voltage with net current and net power into a linear bank.
 *
 *   V = e + r (netA + netW / V)   =>   V^2 - (e + r netA) V - r netW = 0
 *
 * @returns volts, NaN if the bank cannot give that power at any voltage
 */
export function upperRootV(openV: number, bankOhm: number, netA: number, netW: number): number {
  const half = 0.5 * (openV + bankOhm * netA);
  return half + Math.sqrt(half * half + bankOhm * netW);
}

/**
 * Finds the one state of the bus that satisfies bank, load and charger, from the EMFs alone.
 *
 * The bank's current is a monotone, piecewise linear function of bus voltage (one piece for each conduction pattern);
 * charger and load are functions of bus voltage too, so each regime is one scalar search.
 */
export function settleBus(
  bank: Bank,
  state: BankState,
  cache: NetworkCache,
  emfV: Float64Array,
  terms: BusTerms,
  bus: BusPoint,
): void {
  settleRegime(bank, state, cache, emfV, terms, bus);
  const charges = bus.regime === CHARGER_AT_POWER || bus.regime === CHARGER_AT_LIMIT || bus.regime === CHARGER_HOLDS;
  bus.fed = charges || state.conduction.some((conduction) => conduction !== LEAKING);
}

/**
 * Whether an overloaded bus could carry its load again with some power to spare. Tried on a copy: nothing is changed.
 */
export function overloadEnds(
  bank: Bank,
  state: BankState,
  cache: NetworkCache,
  emfV: Float64Array,
  terms: BusTerms,
  bus: BusPoint,
): boolean {
  const conduction = Uint8Array.from(state.conduction);
  const trial: BusPoint = { ...bus, currentA: Float64Array.from(bus.currentA) };
  settleRegime(bank, state, cache, emfV, terms, trial);
  state.conduction.set(conduction);
  return loadIsServed(trial.regime);
}

function settleRegime(
  bank: Bank,
  state: BankState,
  cache: NetworkCache,
  emfV: Float64Array,
  terms: BusTerms,
  bus: BusPoint,
): void {
  // An overloaded bus is tried again only with some power to spare, so that it does not switch for ever at the limit.
  const margin = bus.regime === BUS_OVERLOADED ? 1 + OVERLOAD_MARGIN : 1;
  if (terms.ceilingV !== null && terms.chargeW > 0) {
    const ceilingV = terms.ceilingV;
    settleConduction(bank, state, cache, emfV, ceilingV, true, bus);
    const neededA = bus.bankA + loadCurrentA(terms, ceilingV);
    if (neededA >= 0 && neededA <= chargerCurrentA(terms, ceilingV)) {
      bus.regime = CHARGER_HOLDS;
      bus.netA = 0;
      bus.netW = 0;
      return;
    }
    if (neededA > 0) {
      // Down from the ceiling the charger is bounded by its power, below that by its limit.
      let mostV = ceilingV;
      if (Number.isFinite(terms.chargeW)) {
        const netW = terms.chargeW - terms.loadW;
        const carried = settleNet(bank, state, cache, emfV, -terms.loadA, netW, margin, CHARGER_AT_POWER, bus, mostV);
        if (carried && terms.chargeW <= bus.bankV * terms.limitA) return;
        mostV = Math.min(mostV, (1 + ROUNDING) * (terms.chargeW / terms.limitA));
      }
      const netA = terms.limitA - terms.loadA;
      if (settleNet(bank, state, cache, emfV, netA, -terms.loadW, margin, CHARGER_AT_LIMIT, bus, mostV)) return;
      carryNothing(bank, state, cache, emfV, bus);
      return;
    }
  }
  if (settleNet(bank, state, cache, emfV, -terms.loadA, -terms.loadW, margin, CHARGER_IDLE, bus)) return;
  carryNothing(bank, state, cache, emfV, bus);
}

/** The load cannot be carried: a dead bus if not even a short circuit would draw current, else the bank rests without it. */
function carryNothing(bank: Bank, state: BankState, cache: NetworkCache, emfV: Float64Array, bus: BusPoint): void {
  settleConduction(bank, state, cache, emfV, 0, true, bus);
  // A cut through a cross-linked bank leaves conducting chains on both sides of it.
  if (bus.bankA > -FLOW_A) {
    bus.regime = BUS_DEAD;
    return;
  }
  settleConduction(bank, state, cache, emfV, 0, false, bus);
  bus.regime = BUS_OVERLOADED;
}

/**
 * Settles the bus with a net current and a net power: I_bank = netA + netW / V, the root of highest voltage.
 *
 * Walks down the linear pieces from a voltage at which the bank takes more than the net terms give; the first root met is
 * the highest one. There are at most two pieces for each rectifier, so the walk ends.
 *
 * @param margin factor on a power drawn that the bank must be able to carry as well, 1 or more
 * @param mostV voltage above which the net terms do not hold: a bank that takes nothing but its leak would otherwise be
 *   driven to megavolts by a charger at its limit, where a constant power draws next to nothing
 * @returns false if no voltage above the floor carries it
 */
function settleNet(
  bank: Bank,
  state: BankState,
  cache: NetworkCache,
  emfV: Float64Array,
  netA: number,
  netW: number,
  margin: number,
  regime: number,
  bus: BusPoint,
  mostV = Number.POSITIVE_INFINITY,
): boolean {
  bus.regime = regime;
  bus.netA = netA;
  bus.netW = netW;
  if (netW === 0) {
    settleConduction(bank, state, cache, emfV, netA, false, bus);
    return bus.bankV <= mostV && (netA >= 0 || bus.bankV > FLOOR_V);
  }
  settleConduction(bank, state, cache, emfV, 0, false, bus);
  const startA = Math.max(netA, 0) + Math.max(netW, 0) / Math.max(bus.bankV, FLOOR_V);
  if (startA > 0) settleConduction(bank, state, cache, emfV, startA, false, bus);
  if (bus.bankV > mostV) settleConduction(bank, state, cache, emfV, mostV, true, bus);
  let fromV = bus.bankV;
  for (let piece = 0; piece <= 2 * state.conduction.length + 2; piece++) {
    const map = presentMap(bank, state, cache);
    let openV = map.openOffsetV;
    for (let i = 0; i < map.chains; i++) openV += map.voltagePerEmf[i] * effectiveEmfV(bank, state, i, emfV[i]);
    const rootV = upperRootV(openV, map.bankOhm, netA, netW);
    const next = nextPiece(bank, state, cache, emfV, fromV, bus);
    const spared = margin === 1 || netW > 0 || upperRootV(openV, map.bankOhm, netA, margin * netW) > FLOOR_V;
    if (rootV > FLOOR_V && rootV >= next.atV && rootV <= mostV && spared) {
      currentsInto(bank, state, cache, emfV, rootV, true, bus);
      return true;
    }
    if (next.atV <= FLOOR_V) return false;
    fromV = next.beyondV;
    settleConduction(bank, state, cache, emfV, fromV, true, bus);
  }
  return false;
}

/**
 * Highest bus voltage below `fromV` at which a rectifier of the present pattern has to switch, -Infinity if none, and one
 * far enough beyond for it to be switched: a chain that sees little of the bus voltage needs more than a hair.
 */
function nextPiece(
  bank: Bank,
  state: BankState,
  cache: NetworkCache,
  emfV: Float64Array,
  fromV: number,
  bus: BusPoint,
): { readonly atV: number; readonly beyondV: number } {
  const count = state.conduction.length;
  let next = { atV: Number.NEGATIVE_INFINITY, beyondV: Number.NEGATIVE_INFINITY };
  if (state.chainMode.every((mode) => mode === BOTH_WAYS || mode === NO_WAY)) return next;
  // Each condition is linear in bus voltage: two points give the line.
  currentsInto(bank, state, cache, emfV, fromV, true, bus);
  const high = Float64Array.from({ length: count }, (_, i) => wrongSideV(bank, state, i, emfV[i], bus.currentA[i]));
  currentsInto(bank, state, cache, emfV, fromV - 1, true, bus);
  for (let i = 0; i < count; i++) {
    const perVolt = wrongSideV(bank, state, i, emfV[i], bus.currentA[i]) - high[i];
    if (!(perVolt > LEAST_PER_VOLT)) continue;
    const atV = Math.min(fromV, fromV + high[i] / perVolt);
    const beyond = state.conduction[i] === LEAKING ? DEAD_BAND_V : 2 * SLACK_V;
    if (atV > next.atV) next = { atV, beyondV: atV - beyond / perVolt };
  }
  return next;
}

/** The load gets what it asks for. */
export function loadIsServed(regime: number): boolean {
  return regime !== BUS_DEAD && regime !== BUS_OVERLOADED;
}
