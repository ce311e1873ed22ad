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
import { findPiece } from '../bank/ocv-curves.js';
import { staysOnBranch } from './hysteresis-branch.js';

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
  /** As it is at the present temperatures. */
  bank: Bank;
  readonly state: BankState;
  cache: NetworkCache;
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
  /** Branch of the hysteresis that all cells of a chain are on, 1 or -1; 0 if they are not all on one. */
  readonly branch: Int8Array;
  /** Slopes of each chain's EMF now: by the charge it passes, V/As, and by what its cells lose of themselves, V/s. */
  readonly emfPerAs: Float64Array;
  readonly emfPerS: Float64Array;
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
  /** Hysteresis state of each cell; not written where no cell has hysteresis. */
  readonly cellHysteresis: Float64Array;
  /** Piece of its curve on which each cell was found last. */
  readonly pieceOfCell: Int32Array;
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
      fed: true,
    },
    nowS: 0,
    chainOfCell: Int32Array.from(bank.moduleOfCell, (m) => bank.chainOfModule[m]),
    chargePerAs: floats(bank.cells),
    chargePerS: floats(bank.cells),
    offsetA: floats(bank.cells),
    fixedV: floats(bank.cells),
    chainFixedV: floats(chains),
    branch: new Int8Array(chains),
    emfPerAs: floats(chains),
    emfPerS: floats(chains),
    emfShiftV: floats(chains),
    point: {
      cellV: floats(bank.cells),
      cellHysteresis: floats(bank.cells),
      // In the curve of each cell from the start: later looks walk from piece to piece.
      pieceOfCell: bank.curveOfCell.map((curve, c) => findPiece(bank.ocv, curve, state.charge[c])),
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

/** Copies a short array: for a few elements a loop is ten times as fast as the method `set`. */
export function copyInto(from: Float64Array, into: Float64Array): void {
  for (let k = 0; k < from.length; k++) into[k] = from[k];
}

/** Adds one short array to another. */
function addTo(from: Float64Array, into: Float64Array): void {
  for (let k = 0; k < from.length; k++) into[k] += from[k];
}

/** Sets the constants of all cells from the state and the chain currents now. */
export function updateCellConstants(kernel: Kernel): void {
  // Short loops of few arrays: one long one runs out of registers and takes three times as long.
  updateOffsets(kernel);
  updateFixedVoltages(kernel);
  updateSlopes(kernel);
}

function updateOffsets({ bank, state, bus, offsetA, chargePerAs, chargePerS }: Kernel): void {
  const { cellStart, chainOfModule, capacityAs, efficiency, leakageA } = bank;
  const { bleeding } = state;
  for (let m = 0; m < bank.modules; m++) {
    const standbyA = state.asleep[m] === 1 ? bank.asleepA[m] : bank.standbyA[m];
    const bleedA = bank.bleedA[m];
    const chainA = bus.currentA[chainOfModule[m]];
    const end = cellStart[m + 1];
    for (let c = cellStart[m]; c < end; c++) {
      const offset = bleeding[c] === 1 ? standbyA + bleedA : standbyA;
      const efficient = chainA > offset ? efficiency[c] : 1;
      const perAs = 1 / capacityAs[c];
      offsetA[c] = offset;
      chargePerAs[c] = efficient * perAs;
      chargePerS[c] = -(efficient * offset + leakageA[c]) * perAs;
    }
  }
}

function updateFixedVoltages({ bank, state, offsetA, fixedV, chainFixedV }: Kernel): void {
  const { cells, chainCellStart, resistanceOhm, polarisationOhm } = bank;
  const { offsetFilterA } = state;
  for (let i = 0; i < chainFixedV.length; i++) {
    const end = chainCellStart[i + 1];
    let sum = 0;
    for (let c = chainCellStart[i]; c < end; c++) {
      let volts = -resistanceOhm[c] * offsetA[c];
      for (let at = c; at < polarisationOhm.length; at += cells) volts -= polarisationOhm[at] * offsetFilterA[at];
      fixedV[c] = volts;
      sum += volts;
    }
    chainFixedV[i] = sum;
  }
}

/** The pieces must be those of the charges now, or next to them. */
function updateSlopes(kernel: Kernel): void {
  const { bank, state, bus, point, chargePerAs, chargePerS, offsetA, emfPerAs, emfPerS } = kernel;
  const { chainCellStart, hysteresisV, hysteresisPerAs } = bank;
  const { knots, coefficients } = bank.ocv;
  const { charge, hysteresis } = state;
  const { pieceOfCell } = point;
  for (let i = 0; i < emfPerAs.length; i++) {
    const end = chainCellStart[i + 1];
    let perAs = 0;
    let perS = 0;
    for (let c = chainCellStart[i]; c < end; c++) {
      const at = pieceOfCell[c] << 2;
      const d = charge[c] - knots[pieceOfCell[c]];
      const slope = (3 * coefficients[at + 3] * d + 2 * coefficients[at + 2]) * d + coefficients[at + 1];
      perAs += slope * chargePerAs[c];
      perS += slope * chargePerS[c];
    }
    if (bank.hasHysteresis && !staysOnBranch(kernel, i, bus.currentA[i], 1)) {
      const chainA = bus.currentA[i];
      for (let c = chainCellStart[i]; c < end; c++) {
        const toBranch = chainA > offsetA[c] ? 1 - hysteresis[c] : 1 + hysteresis[c];
        const slope = hysteresisV[c] * hysteresisPerAs[c] * toBranch;
        perAs += slope;
        perS -= slope * offsetA[c];
      }
    }
    emfPerAs[i] = perAs;
    emfPerS[i] = perS;
  }
}

/** Sets the shifts of the EMFs by forward drops from the present conduction. */
export function updateEmfShifts(kernel: Kernel): void {
  for (let i = 0; i < kernel.emfShiftV.length; i++)
    kernel.emfShiftV[i] = effectiveEmfV(kernel.bank, kernel.state, i, 0);
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
  let openV = map.openOffsetV;
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
  if (map.offsetA !== null) addTo(map.offsetA, currentA);
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
  const { bank, highestV, lowestV, point, fixedV } = kernel;
  const { cells, modules, cellStart, chainOfModule, resistanceOhm, polarisationOhm } = bank;
  const { cellV } = point;
  const chains = currentA.length;
  for (let m = 0; m < modules; m++) {
    const i = chainOfModule[m];
    const amperes = currentA[i];
    const end = cellStart[m + 1];
    let high = Number.NEGATIVE_INFINITY;
    let low = Number.POSITIVE_INFINITY;
    for (let c = cellStart[m]; c < end; c++) {
      // cellVoltageV(), written out.
      let volts = cellV[c] + fixedV[c] + resistanceOhm[c] * amperes;
      for (let at = c, filter = i; filter < filterA.length; at += cells, filter += chains) {
        volts += polarisationOhm[at] * filterA[filter];
      }
      if (volts > high) high = volts;
      if (volts < low) low = volts;
    }
    highestV[m] = high;
    lowestV[m] = low;
  }
}
