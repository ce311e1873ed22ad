import { BLEED_NONE } from '../bank/bank.js';
import { bleedsAfter } from '../bank/bleed.js';
import { ocvV } from '../bank/ocv-curves.js';
import { cellVoltageV, hysteresisAfter, type Kernel } from './kernel.js';
import type { StepWork } from './step.js';

/** Halvings with which a switching instant is found inside a step: a 1000 s step to a quarter of a second. */
const HALVINGS = 12;

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
    if (highestV[m] < bank.bleedStopV[m] && !state.bleeding.subarray(first, end).includes(1)) continue;
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

/** Share of the step after which cell `c` no longer bleeds (or does not) as it did at the start. */
function switchingShare(kernel: Kernel, work: StepWork, m: number, c: number, was: boolean): number {
  const { bank } = kernel;
  const i = kernel.chainOfCell[c];
  let low = 0;
  let high = 1;
  for (let halving = 0; halving < HALVINGS; halving++) {
    const theta = 0.5 * (low + high);
    const stage = chainWithin(kernel, work, i, theta);
    let lowestV = Number.POSITIVE_INFINITY;
    for (let other = bank.cellStart[m]; other < bank.cellStart[m + 1]; other++) {
      lowestV = Math.min(lowestV, cellWithin(kernel, stage, other));
    }
    if (bleedsAfter(bank, m, was, cellWithin(kernel, stage, c), lowestV, stage.currentA) === was) low = theta;
    else high = theta;
  }
  return 0.5 * (low + high);
}

interface ChainStage {
  readonly elapsedS: number;
  readonly passedAs: number;
  readonly currentA: number;
  /** Filtered currents, one for each time constant. */
  readonly filterA: readonly number[];
}

/** One chain at a share of the step by the cubic through both ends, without solving the network. */
function chainWithin(kernel: Kernel, work: StepWork, i: number, theta: number): ChainStage {
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
  const currentA =
    6 * theta * (1 - theta) * mean + (1 - 4 * theta + 3 * theta * theta) * first + theta * (3 * theta - 2) * last;
  const slope = elapsedS > 0 ? (2 * (passedAs / elapsedS - first)) / elapsedS : 0;
  const chains = work.firstA.length;
  const filterA = Array.from(bank.timeConstantS, (tauS, k) => {
    const decay = Math.exp(-elapsedS / tauS);
    return first + (state.filterA[k * chains + i] - first) * decay + slope * (elapsedS - tauS * (1 - decay));
  });
  return { elapsedS, passedAs, currentA, filterA };
}

function cellWithin(kernel: Kernel, stage: ChainStage, c: number): number {
  const { bank, state } = kernel;
  const z = state.charge[c] + kernel.chargePerAs[c] * stage.passedAs + kernel.chargePerS[c] * stage.elapsedS;
  let volts = ocvV(bank.ocv, bank.curveOfCell[c], z) + kernel.fixedV[c] + bank.resistanceOhm[c] * stage.currentA;
  if (bank.hasHysteresis) {
    const passedAs = stage.passedAs - kernel.offsetA[c] * stage.elapsedS;
    volts += bank.hysteresisV[c] * hysteresisAfter(state.hysteresis[c], passedAs, bank.hysteresisPerAs[c]);
  }
  stage.filterA.forEach((amperes, k) => {
    volts += bank.polarisationOhm[k * bank.cells + c] * amperes;
  });
  return volts;
}
