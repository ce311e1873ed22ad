import { BLEED_ABOVE_LOWEST, BLEED_EACH, BLEED_NONE } from '../bank/bank.js';
import { pastBleedSwitch } from '../bank/bleed.js';
import { ocvV } from '../bank/ocv-curves.js';
import { firstCrossing } from '../mathematics/first-crossing.js';
import { hysteresisAfter } from './chain-emf.js';
import { cellVoltageV, type Kernel } from './kernel.js';
import { chainWithin, type StepWork } from './step.js';

/** Width to which a switching instant is bracketed, share of the step; within it the line through both ends is taken. */
const SWITCHING_TOLERANCE = 0.25;

/** Bleed that switches within a step: which cells, what that changes in their charge, and for how long it is late. */
export interface BleedPlan {
  readonly switched: Uint8Array;
  /** Charge to add to each cell once the step is committed, As. */
  readonly correctionAs: Float64Array;
  any: boolean;
  /** Longest time from a switching instant to the end of the step, s. */
  lateS: number;
}

export function createBleedPlan(cells: number): BleedPlan {
  return { switched: new Uint8Array(cells), correctionAs: new Float64Array(cells), any: false, lateS: 0 };
}

/**
 * Finds the bleed that switches during the latest attempt, from the instant inside the step at which it does. A step
 * need not end there: bleed is so small that for a short while only the charge it takes matters, and that is put right.
 *
 * Call after the attempt's end has been evaluated and before it is committed. Nothing is switched yet.
 */
export function planBleed(kernel: Kernel, work: StepWork, plan: BleedPlan): void {
  const { bank, state, lowestV, highestV } = kernel;
  if (plan.any) {
    plan.switched.fill(0);
    plan.correctionAs.fill(0);
    plan.any = false;
    plan.lateS = 0;
  }
  for (let m = 0; m < bank.modules; m++) {
    if (bank.bleedRule[m] === BLEED_NONE) continue;
    const first = bank.cellStart[m];
    const end = bank.cellStart[m + 1];
    if (highestV[m] < bank.bleedStopV[m] && !anyBleeding(state.bleeding, first, end)) continue;
    // Cells that stop come first: what they did not lose lifts them before others are compared with them. Otherwise a
    // cell that bled too long in a long step would have its neighbours bleed in turn.
    const alike = bank.bleedRule[m] === BLEED_EACH && bank.bleedWhileChargingOnly[m] === 0;
    const stopped = !(alike && lowestV[m] > bank.bleedStopV[m]) && planCells(kernel, work, m, true, lowestV[m], plan);
    if (highestV[m] < bank.bleedStartV[m]) continue;
    const lowV = stopped ? liftedLowestV(kernel, work, m, plan.correctionAs) : lowestV[m];
    planCells(kernel, work, m, false, lowV, plan);
  }
}

/** Switches what a plan says. To be called once its step is committed. */
export function carryOut({ bank, state }: Kernel, plan: BleedPlan): void {
  for (let c = 0; c < bank.cells; c++) {
    if (plan.switched[c] === 0) continue;
    state.bleeding[c] = 1 - state.bleeding[c];
    state.charge[c] += plan.correctionAs[c] / bank.capacityAs[c];
  }
}

/**
 * Plans for those cells of module `m` that bled before (or did not, after `was`) and whose voltage asks for a switch.
 *
 * @returns true if there are any
 */
function planCells(kernel: Kernel, work: StepWork, m: number, was: boolean, lowV: number, plan: BleedPlan): boolean {
  const { bank, state, chainOfCell } = kernel;
  let any = false;
  for (let c = bank.cellStart[m]; c < bank.cellStart[m + 1]; c++) {
    if ((state.bleeding[c] === 1) !== was) continue;
    const volts = cellVoltageV(kernel, c, work.lastA, work.endFilterA);
    const past = pastBleedSwitch(bank, m, was, volts, lowV, work.lastA[chainOfCell[c]]);
    if (past < 0) continue;
    any = true;
    const restS = (1 - switchingShare(kernel, work, m, c, was, past)) * work.stepS;
    const efficiency = kernel.chargePerAs[c] * bank.capacityAs[c];
    plan.switched[c] = 1;
    plan.correctionAs[c] = (was ? 1 : -1) * efficiency * bank.bleedA[m] * restS;
    plan.lateS = Math.max(plan.lateS, restS);
  }
  plan.any ||= any;
  return any;
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

/** Share of the step after which cell `c` no longer bleeds (or does not) as it did at the start; `endPast` at its end. */
function switchingShare(kernel: Kernel, work: StepWork, m: number, c: number, was: boolean, endPast: number): number {
  const { bank } = kernel;
  const i = kernel.chainOfCell[c];
  const pastAt = (theta: number): number => {
    const currentA = chainWithin(kernel, work, i, theta);
    let lowestV = Number.NEGATIVE_INFINITY;
    if (bank.bleedRule[m] === BLEED_ABOVE_LOWEST) {
      lowestV = Number.POSITIVE_INFINITY;
      for (let other = bank.cellStart[m]; other < bank.cellStart[m + 1]; other++) {
        lowestV = Math.min(lowestV, cellWithin(kernel, work, i, other, theta * work.stepS, currentA));
      }
    }
    return pastBleedSwitch(
      bank,
      m,
      was,
      cellWithin(kernel, work, i, c, theta * work.stepS, currentA),
      lowestV,
      currentA,
    );
  };
  const startPast = pastAt(0);
  if (startPast >= 0) return 0;
  const whole = { low: 0, lowValue: startPast, high: 1, highValue: endPast };
  const { low, lowValue, high, highValue } = firstCrossing(pastAt, whole, SWITCHING_TOLERANCE);
  return low + ((high - low) * lowValue) / (lowValue - highValue);
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
