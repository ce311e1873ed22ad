import type { Bank } from '../bank/bank.js';
import type { BankState } from '../bank/bank-state.js';
import {
  BUS_DEAD,
  BUS_OVERLOADED,
  type BusPoint,
  type BusTerms,
  CHARGER_HOLDS,
  CHARGER_IDLE,
  upperRootV,
} from '../bank/bus.js';
import { createNetworkCache, effectiveEmfV, type NetworkCache } from '../bank/conduction.js';
import { solveNetwork } from '../bank/network.js';

/**
 * What the stepper works with: a bank, its state, the terms at its bus, and room for the stages of a step.
 *
 * Integration runs in charge coordinates. All cells of a chain carry one terminal current, so a step integrates one
 * passed charge q and one filtered current per time constant for each chain; every cell follows by constants of its own:
 *
 *   z(t) = z0 + a q(t) + b t
 *
 * with a = e / Q and b = -(e offset + leakage) / Q, e the coulombic efficiency while the cell's own current charges it and
 * 1 otherwise, offset its standby and bleed current. Drift along a chain thus has no integration error.
 */
export interface Kernel {
  readonly bank: Bank;
  readonly state: BankState;
  readonly cache: NetworkCache;
  readonly terms: BusTerms;
  /** Bus and chain currents now, that is at the start of the step. */
  readonly bus: BusPoint;
  nowS: number;

  // Constants of the cells over a step.
  readonly chainOfCell: Int32Array;
  readonly chargePerAs: Float64Array;
  readonly chargePerS: Float64Array;
  readonly offsetA: Float64Array;
  /** Voltage of a cell that stands still within a step: offset current through its resistances. */
  readonly fixedV: Float64Array;
  readonly chainFixedV: Float64Array;
  /** Shift of a chain's EMF by its forward drop. */
  readonly emfShiftV: Float64Array;

  // Results of the latest evaluation.
  readonly point: EvaluatedPoint;
  /** Extremes of the cell voltages of each module at the latest `updateExtremes`. */
  readonly highestV: Float64Array;
  readonly lowestV: Float64Array;
  /** Evaluations of the network so far, for benchmarks. */
  evaluations: number;
}

export interface EvaluatedPoint {
  /** Open-circuit and hysteresis voltage of each cell. */
  readonly cellV: Float64Array;
  readonly emfV: Float64Array;
  readonly effectiveV: Float64Array;
  readonly currentA: Float64Array;
  bankA: number;
  bankV: number;
}

export function createKernel(bank: Bank, state: BankState): Kernel {
  const chains = bank.wiring.chains.length;
  const floats = (length: number): Float64Array => new Float64Array(length);
  return {
    bank,
    state,
    cache: createNetworkCache(),
    terms: { loadW: 0, loadA: 0, chargeW: 0, limitA: 0, ceilingV: null },
    bus: {
      map: solveNetwork(bank.wiring, bank.chainOhm, state.conduction),
      currentA: floats(chains),
      bankA: 0,
      bankV: 0,
      regime: CHARGER_IDLE,
      netA: 0,
      netW: 0,
    },
    nowS: 0,
    chainOfCell: Int32Array.from(bank.moduleOfCell, (m) => bank.chainOfModule[m]),
    chargePerAs: floats(bank.cells),
    chargePerS: floats(bank.cells),
    offsetA: floats(bank.cells),
    fixedV: floats(bank.cells),
    chainFixedV: floats(chains),
    emfShiftV: floats(chains),
    point: {
      cellV: floats(bank.cells),
      emfV: floats(chains),
      effectiveV: floats(chains),
      currentA: floats(chains),
      bankA: 0,
      bankV: 0,
    },
    highestV: floats(bank.modules),
    lowestV: floats(bank.modules),
    evaluations: 0,
  };
}

/** Sets the constants of all cells from the state and the chain currents now. */
export function updateCellConstants(kernel: Kernel): void {
  const { bank, state, bus, chainOfCell, chargePerAs, chargePerS, offsetA, fixedV, chainFixedV } = kernel;
  const { cells, moduleOfCell, capacityAs, polarisationOhm } = bank;
  const pairs = bank.timeConstantS.length;
  chainFixedV.fill(0);
  for (let c = 0; c < cells; c++) {
    const m = moduleOfCell[c];
    const i = chainOfCell[c];
    const standbyA = state.asleep[m] === 1 ? bank.asleepA[m] : bank.standbyA[m];
    const offset = state.bleeding[c] === 1 ? standbyA + bank.bleedA[m] : standbyA;
    const efficiency = bus.currentA[i] > offset ? bank.efficiency[c] : 1;
    offsetA[c] = offset;
    chargePerAs[c] = efficiency / capacityAs[c];
    chargePerS[c] = -(efficiency * offset + bank.leakageA[c]) / capacityAs[c];
    let volts = -bank.resistanceOhm[c] * offset;
    for (let k = 0; k < pairs; k++) volts -= polarisationOhm[k * cells + c] * state.offsetFilterA[k * cells + c];
    fixedV[c] = volts;
    chainFixedV[i] += volts;
  }
}

/** Sets the shifts of the EMFs by forward drops from the present conduction. */
export function updateEmfShifts(kernel: Kernel): void {
  for (let i = 0; i < kernel.emfShiftV.length; i++) kernel.emfShiftV[i] = effectiveEmfV(kernel.bank, kernel.state, i, 0);
}

/**
 * EMF of every chain, V, `elapsedS` into the step with charges `passedAs` and filtered currents `filterA`:
 *
 *   E = sum over cells of U(z) + M h + offset voltage, + sum_k R_k filter_k
 *
 * Writes `point.cellV` and `point.emfV`.
 */
export function updateEmf(kernel: Kernel, elapsedS: number, passedAs: Float64Array, filterA: Float64Array): void {
  const { bank, state, point, chainOfCell, chargePerAs, chargePerS, offsetA, chainFixedV } = kernel;
  const { charge, hysteresis } = state;
  const { cells, curveOfCell, ocv, hasHysteresis, hysteresisV, hysteresisPerAs, chainPolarisationOhm } = bank;
  const { knots, coefficients, bucket, firstBucket, buckets, lowest, perUnit } = ocv;
  const { cellV, emfV } = point;
  const chains = emfV.length;
  emfV.set(chainFixedV);
  for (let c = 0; c < cells; c++) {
    const i = chainOfCell[c];
    const q = passedAs[i];
    const z = charge[c] + chargePerAs[c] * q + chargePerS[c] * elapsedS;
    // ocvV() of bank/ocv-curves.ts, written out: the call costs a third of the evaluation.
    const curve = curveOfCell[c];
    const position = (z - lowest[curve]) * perUnit[curve] + 1;
    const most = buckets[curve] - 1;
    const cell = position < 1 ? 0 : position >= most ? most : position | 0;
    let piece = bucket[firstBucket[curve] + cell];
    if (cell > 0) while (z >= knots[piece + 1]) piece++;
    const d = z - knots[piece];
    const at = piece << 2;
    let volts = ((coefficients[at + 3] * d + coefficients[at + 2]) * d + coefficients[at + 1]) * d + coefficients[at];
    if (hasHysteresis) {
      volts += hysteresisV[c] * hysteresisAfter(hysteresis[c], q - offsetA[c] * elapsedS, hysteresisPerAs[c]);
    }
    cellV[c] = volts;
    emfV[i] += volts;
  }
  for (let k = 0; k < chainPolarisationOhm.length; k++) emfV[k % chains] += chainPolarisationOhm[k] * filterA[k];
}

/**
 * Hysteresis state after a passed charge of one sign.
 *
 *   dh/dt = gamma |I| / Q (sign(I) - h)   =>   h = s + (h0 - s) exp(-gamma |q| / Q),   s = sign(q)
 *
 * Exact while the current keeps its sign.
 *
 * @param passedAs charge into the cell, As
 * @param perAs gamma / Q, 1/As
 * @see Plett 2015, Battery Management Systems vol. 1, ch. 2 (one-state hysteresis)
 */
export function hysteresisAfter(h: number, passedAs: number, perAs: number): number {
  if (passedAs >= 0) return h === 1 ? 1 : 1 + (h - 1) * Math.exp(-perAs * passedAs);
  return h === -1 ? -1 : -1 + (h + 1) * Math.exp(perAs * passedAs);
}

/**
 * Solves the bus for the EMFs of `point` with pattern and regime kept: the right-hand side of the step.
 *
 * @returns false if the regime has no solution here (a load that the bank cannot carry)
 */
export function solveKept(kernel: Kernel): boolean {
  const { bus, point, emfShiftV } = kernel;
  const { map } = bus;
  const { emfV, effectiveV, currentA } = point;
  const chains = map.chains;
  const { currentPerEmf, currentPerBank, voltagePerEmf, bankOhm } = map;
  kernel.evaluations++;
  let openV = 0;
  for (let i = 0; i < chains; i++) {
    const effective = emfV[i] + emfShiftV[i];
    effectiveV[i] = effective;
    openV += voltagePerEmf[i] * effective;
  }
  let bankA: number;
  let bankV: number;
  if (bus.regime === CHARGER_HOLDS || bus.regime === BUS_DEAD) {
    bankV = bus.regime === BUS_DEAD ? 0 : (kernel.terms.ceilingV ?? 0);
    bankA = (bankV - openV) / bankOhm;
  } else if (bus.regime === BUS_OVERLOADED || bus.netW === 0) {
    bankA = bus.regime === BUS_OVERLOADED ? 0 : bus.netA;
    bankV = openV + bankOhm * bankA;
  } else {
    bankV = upperRootV(openV, bankOhm, bus.netA, bus.netW);
    if (!(bankV > 0)) return false;
    bankA = bus.netA + bus.netW / bankV;
  }
  for (let i = 0; i < chains; i++) {
    let sum = currentPerBank[i] * bankA;
    const row = i * chains;
    for (let j = 0; j < chains; j++) sum += currentPerEmf[row + j] * effectiveV[j];
    currentA[i] = sum;
  }
  point.bankA = bankA;
  point.bankV = bankV;
  return true;
}

/** Voltage of cell `c` at the latest evaluation, V. */
export function cellVoltageV(kernel: Kernel, c: number, currentA: Float64Array, filterA: Float64Array): number {
  const { bank, point, chainOfCell, fixedV } = kernel;
  const i = chainOfCell[c];
  const chains = currentA.length;
  let volts = point.cellV[c] + fixedV[c] + bank.resistanceOhm[c] * currentA[i];
  const pairs = bank.timeConstantS.length;
  for (let k = 0; k < pairs; k++) volts += bank.polarisationOhm[k * bank.cells + c] * filterA[k * chains + i];
  return volts;
}

/** Sets the extremes of the cell voltages of each module at the latest evaluation. */
export function updateExtremes(kernel: Kernel, currentA: Float64Array, filterA: Float64Array): void {
  const { bank, highestV, lowestV } = kernel;
  for (let m = 0; m < bank.modules; m++) {
    let high = Number.NEGATIVE_INFINITY;
    let low = Number.POSITIVE_INFINITY;
    for (let c = bank.cellStart[m]; c < bank.cellStart[m + 1]; c++) {
      const volts = cellVoltageV(kernel, c, currentA, filterA);
      if (volts > high) high = volts;
      if (volts < low) low = volts;
    }
    highestV[m] = high;
    lowestV[m] = low;
  }
}
