import { BLEED_NONE } from '../bank/bank.js';
import { bleedsAfter } from '../bank/bleed.js';
import { ocvV } from '../bank/ocv-curves.js';
import { cellVoltageV, hysteresisAfter, type Kernel } from './kernel.js';
import type { StepWork } from './step.js';

/** Halvings with which a switching instant is found inside a step: a 100 s step to half a second. */
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
  const { bank, state, chainOfCell, lowestV, highestV } = kernel;
  let switched = false;
  for (let m = 0; m < bank.modules; m++) {
    if (bank.bleedRule[m] === BLEED_NONE) continue;
    const first = bank.cellStart[m];
    const end = bank.cellStart[m + 1];
    if (highestV[m] < bank.bleedStopV[m] && !anyBleeding(state.bleeding, first, end)) continue;
    const i = chainOfCell[first];
    for (let c = first; c < end; c++) {
      const was = state.bleeding[c] === 1;
      const volts = cellVoltageV(kernel, c, work.lastA, work.endFilterA);
      if (bleedsAfter(bank, m, was, volts, lowestV[m], work.lastA[i]) === was) continue;
      if (!switched) correctionAs.fill(0);
      switched = true;
      const restS = (1 - switchingShare(kernel, work, m, c, was)) * work.stepS;
      const efficiency = kernel.chargePerAs[c] * bank.capacityAs[c];
      correctionAs[c] = (was ? 1 : -1) * efficiency * bank.bleedA[m] * restS;
    }
    if (switched) {
      for (let c = first; c < end; c++) if (correctionAs[c] !== 0) state.bleeding[c] = correctionAs[c] < 0 ? 1 : 0;
    }
  }
  return switched;
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
    let lowestV = Number.POSITIVE_INFINITY;
    for (let other = bank.cellStart[m]; other < bank.cellStart[m + 1]; other++) {
      lowestV = Math.min(lowestV, cellWithin(kernel, work, i, other, theta * work.stepS, currentA));
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
