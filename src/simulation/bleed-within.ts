import { BLEED_ABOVE_LOWEST, BLEED_NONE } from '../bank/bank.js';
import { bleedsAfter } from '../bank/bleed.js';
import { ocvV } from '../bank/ocv-curves.js';
import { hysteresisAfter } from './chain-emf.js';
import { cellVoltageV, type Kernel } from './kernel.js';
import type { StepWork } from './step.js';

/** Halvings with which a switching instant is found inside a step: a 100 s step to a second. */
const HALVINGS = 8;

/**
 * Switches bleed that changed during the latest attempt, from the instant inside the step at which it did. The step
 * itself is not repeated: bleed is so small that only the charge it takes matters, and that is put right.
 *
 * Call after the attempt's end has been evaluated and before it is committed.
 *
 * @param correctionAs charge to add to each cell after the commit, As; overwritten
 * @returns true if any cell was switched
 */
export function switchBleedWithin(kernel: Kernel, work: StepWork, correctionAs: Float64Array): boolean {
  const { bank, state, lowestV, highestV } = kernel;
  let switched = false;
  for (let m = 0; m < bank.modules; m++) {
    if (bank.bleedRule[m] === BLEED_NONE) continue;
    const first = bank.cellStart[m];
    const end = bank.cellStart[m + 1];
    if (highestV[m] < bank.bleedStopV[m] && !anyBleeding(state.bleeding, first, end)) continue;
    if (!switched) correctionAs.fill(0);
    // Cells that stop come first: what they did not lose lifts them before others are compared with them. Otherwise a
    // cell that bled too long in a long step would have its neighbours bleed in turn.
    const stopped = switchCells(kernel, work, m, true, lowestV[m], correctionAs);
    const lowV = stopped ? liftedLowestV(kernel, work, m, correctionAs) : lowestV[m];
    const started = switchCells(kernel, work, m, false, lowV, correctionAs);
    switched ||= stopped || started;
  }
  return switched;
}

/** Switches those cells of module `m` that bled before (or did not, after `was`) and whose voltage asks for it. */
function switchCells(
  kernel: Kernel,
  work: StepWork,
  m: number,
  was: boolean,
  lowV: number,
  correctionAs: Float64Array,
): boolean {
  const { bank, state, chainOfCell } = kernel;
  let switched = false;
  for (let c = bank.cellStart[m]; c < bank.cellStart[m + 1]; c++) {
    if ((state.bleeding[c] === 1) !== was || correctionAs[c] !== 0) continue;
    const volts = cellVoltageV(kernel, c, work.lastA, work.endFilterA);
    if (bleedsAfter(bank, m, was, volts, lowV, work.lastA[chainOfCell[c]]) === was) continue;
    switched = true;
    state.bleeding[c] = was ? 0 : 1;
    const restS = (1 - switchingShare(kernel, work, m, c, was)) * work.stepS;
    const efficiency = kernel.chargePerAs[c] * bank.capacityAs[c];
    correctionAs[c] = (was ? 1 : -1) * efficiency * bank.bleedA[m] * restS;
  }
  return switched;
}

/** Lowest cell voltage of module `m` at the end of the step, with the corrections found so far. */
function liftedLowestV(kernel: Kernel, work: StepWork, m: number, correctionAs: Float64Array): number {
  const { bank, state, chainOfCell, chargePerAs, chargePerS } = kernel;
  let lowest = Number.POSITIVE_INFINITY;
  for (let c = bank.cellStart[m]; c < bank.cellStart[m + 1]; c++) {
    let volts = cellVoltageV(kernel, c, work.lastA, work.endFilterA);
    if (correctionAs[c] !== 0) {
      const z = state.charge[c] + chargePerAs[c] * work.endAs[chainOfCell[c]] + chargePerS[c] * work.stepS;
      const curve = bank.curveOfCell[c];
      volts += ocvV(bank.ocv, curve, z + correctionAs[c] / bank.capacityAs[c]) - ocvV(bank.ocv, curve, z);
    }
    lowest = Math.min(lowest, volts);
  }
  return lowest;
}

function anyBleeding(bleeding: Uint8Array, first: number, end: number): boolean {
  for (let c = first; c < end; c++) if (bleeding[c] === 1) return true;
  return false;
}

/** Share of the step after which cell `c` no longer bleeds (or does not) as it did at the start. */
function switchingShare(kernel: Kernel, work: StepWork, m: number, c: number, was: boolean): number {
  const { bank } = kernel;
  const i = kernel.chainOfCell[c];
  let low = 0;
  let high = 1;
  for (let halving = 0; halving < HALVINGS; halving++) {
    const theta = 0.5 * (low + high);
    const currentA = chainWithin(kernel, work, i, theta);
    let lowestV = Number.NEGATIVE_INFINITY;
    if (bank.bleedRule[m] === BLEED_ABOVE_LOWEST) {
      lowestV = Number.POSITIVE_INFINITY;
      for (let other = bank.cellStart[m]; other < bank.cellStart[m + 1]; other++) {
        lowestV = Math.min(lowestV, cellWithin(kernel, work, i, other, theta * work.stepS, currentA));
      }
    }
    const cellV = cellWithin(kernel, work, i, c, theta * work.stepS, currentA);
    if (bleedsAfter(bank, m, was, cellV, lowestV, currentA) === was) low = theta;
    else high = theta;
  }
  return 0.5 * (low + high);
}

/**
 * One chain at a share of the step by the cubic through both ends, without solving the network: its charge and filtered
 * currents in `work.passedAs` and `work.filterA`. @returns its current
 */
function chainWithin(kernel: Kernel, work: StepWork, i: number, theta: number): number {
  const { bank, state } = kernel;
  const { stepS } = work;
  const first = work.firstA[i];
  const last = work.lastA[i];
  const mean = work.endAs[i] / stepS;
  const elapsedS = theta * stepS;
  const passedAs =
    stepS *
    (theta * theta * (3 - 2 * theta) * mean +
      theta * (1 - theta) * (1 - theta) * first +
      theta * theta * (theta - 1) * last);
  work.passedAs[i] = passedAs;
  const slope = (2 * (passedAs / elapsedS - first)) / elapsedS;
  const chains = work.firstA.length;
  for (let k = 0; k < bank.timeConstantS.length; k++) {
    const tauS = bank.timeConstantS[k];
    const decay = Math.exp(-elapsedS / tauS);
    const at = k * chains + i;
    work.filterA[at] = first + (state.filterA[at] - first) * decay + slope * (elapsedS - tauS * (1 - decay));
  }
  return 6 * theta * (1 - theta) * mean + (1 - 4 * theta + 3 * theta * theta) * first + theta * (3 * theta - 2) * last;
}

/** Voltage of a cell at what `chainWithin` found. */
function cellWithin(kernel: Kernel, work: StepWork, i: number, c: number, elapsedS: number, currentA: number): number {
  const { bank, state } = kernel;
  const passedAs = work.passedAs[i];
  const z = state.charge[c] + kernel.chargePerAs[c] * passedAs + kernel.chargePerS[c] * elapsedS;
  let volts = ocvV(bank.ocv, bank.curveOfCell[c], z) + kernel.fixedV[c] + bank.resistanceOhm[c] * currentA;
  if (bank.hasHysteresis) {
    const inAs = passedAs - kernel.offsetA[c] * elapsedS;
    volts += bank.hysteresisV[c] * hysteresisAfter(state.hysteresis[c], inAs, bank.hysteresisPerAs[c]);
  }
  const chains = work.firstA.length;
  for (let k = 0; k < bank.timeConstantS.length; k++) {
    volts += bank.polarisationOhm[k * bank.cells + c] * work.filterA[k * chains + i];
  }
  return volts;
}
