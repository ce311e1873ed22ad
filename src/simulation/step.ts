import type { BankEqualiser } from '../bank/equaliser.js';
import { updateEmf } from './chain-emf.js';
import { commitHysteresis } from './hysteresis-branch.js';
import { copyInto, type Kernel, solveKept, updateExtremes } from './kernel.js';
import { createLinearised, factorLinearised, type Linearised, linearise, solveLinearised } from './linearised.js';

/** Room for the stages of one step; arrays over chains, filters pair by pair (pair * chains + chain). */
export interface StepWork {
  readonly linearised: Linearised;
  /** Chain currents at the start and at the end of the latest attempt. */
  readonly firstA: Float64Array;
  readonly lastA: Float64Array;
  /** What each of the three stages adds to charge, As, and to filtered currents, A. */
  readonly stage1: StageChange;
  readonly stage2: StageChange;
  readonly stage3: StageChange;
  /** Embedded error of the charge of each chain in the latest attempt, As. */
  readonly errorAs: Float64Array;
  /** Charge passed since the start of the step, As. */
  readonly passedAs: Float64Array;
  readonly filterA: Float64Array;
  /** At the end of the latest attempt. */
  readonly endAs: Float64Array;
  readonly endFilterA: Float64Array;
  /** Cells whose bleed has been switched at the instant being settled. */
  readonly bleedSpent: Uint8Array;
  endBankA: number;
  endBankV: number;
  stepS: number;
}

/** Change of the integrated quantities by one stage. */
interface StageChange {
  readonly chargeAs: Float64Array;
  readonly filterA: Float64Array;
}

/** Least progress of a step, also of one that ends at an event, s. */
export const LEAST_STEP_S = 0.01;
/** Embedded error of the charge of a chain that a step may leave, as a fraction of its smallest cell. */
const CHARGE_TOLERANCE = 1e-4;
/** The same per second of a step: bounds the error of the mean current of short steps, as in a taper, 1/s. */
const RATE_TOLERANCE = 4e-7;
/** Share of both that may be between modules in series with an equaliser at work. */
const BETWEEN_MODULES = 0.1;
/** Embedded error of a filtered current, as a fraction of the charge of the smallest cell per second (0.01 C), 1/s. */
const FILTER_TOLERANCE = 2.8e-6;

export function createStepWork(kernel: Kernel): StepWork {
  const chains = kernel.emfShiftV.length;
  const filters = kernel.state.filterA.length;
  const stage = (): StageChange => ({ chargeAs: new Float64Array(chains), filterA: new Float64Array(filters) });
  return {
    linearised: createLinearised(kernel),
    firstA: new Float64Array(chains),
    lastA: new Float64Array(chains),
    stage1: stage(),
    stage2: stage(),
    stage3: stage(),
    errorAs: new Float64Array(chains),
    passedAs: new Float64Array(chains),
    filterA: new Float64Array(filters),
    endAs: new Float64Array(chains),
    endFilterA: new Float64Array(filters),
    bleedSpent: new Uint8Array(kernel.bank.cells),
    endBankA: 0,
    endBankV: 0,
    stepS: 0,
  };
}

/** Coefficients of ROS3. */
const GAMMA = 0.435866521508459;
const TIME_2 = 0.24291996454816805;
const TIME_3 = 2.185138002766406;
const C_21 = -1.0156171083877703;
const C_31 = 4.07599564525377;
const C_32 = 9.20767942983308;
const END_2 = 6.1697947043828245;
const END_3 = -0.42772256543218573;
const ERROR_1 = 0.5;
const ERROR_2 = -2.907955871680547;
const ERROR_3 = 0.2235406989781157;

/**
 * Tries one step of `stepS` seconds with pattern and regime kept; the state stays as it is until `commitStep`.
 *
 * Charge and filtered currents follow ROS3, a linearly implicit method of order 3 with an embedded one of order 2: near
 * the top, and while the charger holds a voltage, strings share within seconds, and an explicit step could not be longer
 * than that. With y the charges and filtered currents, f their rates, J the derivative of f and y0 at the start:
 *
 *   (1 / (gamma h) - J) u_s = f(t_s, y_s) + sum_{r<s} c_sr u_r / h + gamma_s h df/dt,   y_1 = y0,   y_2 = y_3 = y0 + u_1
 *   y(h) = y0 + u_1 + m_2 u_2 + m_3 u_3,   error = e_1 u_1 + e_2 u_2 + e_3 u_3
 *
 * @returns the largest error over the chains, in tolerances; Infinity if the bus has no solution on the way
 * @see Sandu, Verwer, Blom, Spee, Carmichael & Potra 1997, Atmospheric Environment 31(20), 3459-3472 (coefficients from
 *   memory; their order is tested)
 */
export function tryStep(kernel: Kernel, work: StepWork, stepS: number): number {
  const { bank, point, state } = kernel;
  const { linearised, firstA, lastA, passedAs, filterA, endAs, endFilterA } = work;
  const { chargeAs: q1, filterA: f1 } = work.stage1;
  const { chargeAs: q2, filterA: f2 } = work.stage2;
  const { chargeAs: q3, filterA: f3 } = work.stage3;
  const chains = firstA.length;
  const filters = filterA.length;
  work.stepS = stepS;
  linearise(kernel, linearised);
  factorLinearised(kernel, linearised, GAMMA * stepS);

  stageRates(linearised, firstA, state.filterA, GAMMA * stepS, q1, f1);
  solveLinearised(linearised, q1, f1);

  for (let i = 0; i < chains; i++) passedAs[i] = q1[i];
  for (let at = 0; at < filters; at++) filterA[at] = state.filterA[at] + f1[at];
  updateEmf(kernel, GAMMA * stepS, passedAs, filterA);
  if (!solveKept(kernel)) return Number.POSITIVE_INFINITY;
  const from1 = C_21 / stepS;
  stageRates(linearised, point.currentA, filterA, TIME_2 * stepS, q2, f2);
  for (let i = 0; i < chains; i++) q2[i] += from1 * q1[i];
  for (let at = 0; at < filters; at++) f2[at] += from1 * f1[at];
  solveLinearised(linearised, q2, f2);

  const also1 = C_31 / stepS;
  const from2 = C_32 / stepS;
  stageRates(linearised, point.currentA, filterA, TIME_3 * stepS, q3, f3);
  for (let i = 0; i < chains; i++) q3[i] += also1 * q1[i] + from2 * q2[i];
  for (let at = 0; at < filters; at++) f3[at] += also1 * f1[at] + from2 * f2[at];
  solveLinearised(linearised, q3, f3);

  let worst = 0;
  const perCharge = 1 / Math.min(CHARGE_TOLERANCE, RATE_TOLERANCE * stepS);
  for (let i = 0; i < chains; i++) {
    endAs[i] = q1[i] + END_2 * q2[i] + END_3 * q3[i];
    const errorAs = ERROR_1 * q1[i] + ERROR_2 * q2[i] + ERROR_3 * q3[i];
    work.errorAs[i] = errorAs;
    const perAs = 1 / bank.chainCapacityAs[i];
    let error = Math.abs(errorAs) * perAs * perCharge;
    if (!(error <= worst)) worst = error;
    for (let at = i; at < filters; at += chains) {
      endFilterA[at] = state.filterA[at] + f1[at] + END_2 * f2[at] + END_3 * f3[at];
      const errorA = ERROR_1 * f1[at] + ERROR_2 * f2[at] + ERROR_3 * f3[at];
      error = Math.abs(errorA) * perAs * (1 / FILTER_TOLERANCE);
      if (!(error <= worst)) worst = error;
    }
  }
  if (bank.equaliser !== null && state.equaliserOn[0] === 1) {
    worst = Math.max(worst, errorBetween(work.errorAs, bank.equaliser, bank.chainCapacityAs) * perCharge);
  }
  updateEmf(kernel, stepS, endAs, endFilterA);
  if (!solveKept(kernel)) return Number.POSITIVE_INFINITY;
  copyInto(point.currentA, lastA);
  work.endBankA = point.bankA;
  work.endBankV = point.bankV;
  return worst;
}

/**
 * Largest error of what an equaliser moves between two modules, as a fraction of the smaller and in parts of what is
 * allowed of it. Parallel strings take back by sharing what a step errs; between modules in series nothing does.
 */
function errorBetween(
  errorAs: Float64Array,
  { devices, lower, upper }: BankEqualiser,
  chainCapacityAs: Float64Array,
): number {
  let worst = 0;
  for (let k = 0; k < devices; k++) {
    const smallerAs = Math.min(chainCapacityAs[lower[k]], chainCapacityAs[upper[k]]);
    worst = Math.max(worst, Math.abs(errorAs[lower[k]] - errorAs[upper[k]]) / smallerAs);
  }
  return worst / BETWEEN_MODULES;
}

/** Rates f of charges and filtered currents at a stage, with the share `timeS` of what time alone changes. */
function stageRates(
  { currentPerS, filterPerS }: Linearised,
  currentA: Float64Array,
  filterA: Float64Array,
  timeS: number,
  rateA: Float64Array,
  filterRate: Float64Array,
): void {
  const chains = currentA.length;
  for (let i = 0; i < chains; i++) rateA[i] = currentA[i] + timeS * currentPerS[i];
  for (let k = 0, at = 0; k < filterPerS.length; k++) {
    const perS = filterPerS[k];
    for (let i = 0; i < chains; i++, at++) filterRate[at] = (rateA[i] - filterA[at]) * perS;
  }
}

/**
 * Filtered current after `elapsedS` of a current that runs as a parabola:
 *
 *   I(t) = I0 + s t + b t^2   =>   F(t) = P(t) + (F0 - P(0)) exp(-t / tau),   P = I - tau I' + tau^2 I''
 *
 * @param slope s, A/s
 * @param bend b, A/s2
 */
export function filterAfter(
  tauS: number,
  elapsedS: number,
  fromA: number,
  firstA: number,
  slope: number,
  bend: number,
): number {
  const decay = Math.exp(-elapsedS / tauS);
  const lag = tauS * (1 - decay);
  return (
    firstA +
    (fromA - firstA) * decay +
    slope * (elapsedS - lag) +
    bend * (elapsedS * elapsedS - 2 * tauS * (elapsedS - lag))
  );
}

/**
 * Evaluates the latest attempt at a share `theta` of its step: charge by the cubic through both ends and their currents,
 * filters for that charge. Leaves currents and voltages in `kernel.point` and the extremes of the cells.
 */
export function evaluateWithin(kernel: Kernel, work: StepWork, theta: number): boolean {
  const elapsedS = theta * work.stepS;
  if (theta === 1) {
    copyInto(work.endAs, work.passedAs);
    copyInto(work.endFilterA, work.filterA);
  } else {
    for (let i = 0; i < work.firstA.length; i++) chainWithin(kernel, work, i, theta);
  }
  updateEmf(kernel, elapsedS, work.passedAs, work.filterA);
  if (!solveKept(kernel)) return false;
  updateExtremes(kernel, kernel.point.currentA, work.filterA);
  return true;
}

/**
 * Ends the latest attempt at `stepS`, before its end, as it was on its way there.
 *
 * @returns false if the bus has no solution there: the attempt is then spoilt
 */
export function shortenStep(kernel: Kernel, work: StepWork, stepS: number): boolean {
  const { point } = kernel;
  if (!evaluateWithin(kernel, work, stepS / work.stepS)) return false;
  work.stepS = stepS;
  copyInto(work.passedAs, work.endAs);
  copyInto(work.filterA, work.endFilterA);
  copyInto(point.currentA, work.lastA);
  work.endBankA = point.bankA;
  work.endBankV = point.bankV;
  return true;
}

/**
 * One chain at a share `theta` of the latest attempt, by the cubic of charge through both ends and their currents: its
 * charge and filtered currents in `work.passedAs` and `work.filterA`.
 *
 * @returns its current, A, which runs as a parabola
 */
export function chainWithin({ bank, state }: Kernel, work: StepWork, i: number, theta: number): number {
  const { stepS } = work;
  const firstA = work.firstA[i];
  const lastA = work.lastA[i];
  const meanA = work.endAs[i] / stepS;
  const slope = (6 * meanA - 4 * firstA - 2 * lastA) / stepS;
  const bend = (3 * firstA + 3 * lastA - 6 * meanA) / (stepS * stepS);
  const elapsedS = theta * stepS;
  work.passedAs[i] = elapsedS * (firstA + elapsedS * (slope / 2 + elapsedS * (bend / 3)));
  const chains = work.firstA.length;
  for (let k = 0, at = i; k < bank.timeConstantS.length; k++, at += chains) {
    work.filterA[at] = filterAfter(bank.timeConstantS[k], elapsedS, state.filterA[at], firstA, slope, bend);
  }
  return firstA + elapsedS * (slope + elapsedS * bend);
}

/**
 * Energy into the bank at its bus during the latest attempt, J, by Simpson's rule. Leaves the end as what was evaluated
 * last.
 */
export function busEnergyJ(kernel: Kernel, work: StepWork): number {
  const { bus, point } = kernel;
  evaluateWithin(kernel, work, 0.5);
  const middleW = point.bankA * point.bankV;
  evaluateWithin(kernel, work, 1);
  return (work.stepS / 6) * (bus.bankA * bus.bankV + 4 * middleW + point.bankA * point.bankV);
}

/** Makes the end of the latest attempt, which must be what was evaluated last, the present. */
export function commitStep(kernel: Kernel, work: StepWork): void {
  const { bank, state, chainOfCell, chargePerAs, chargePerS, offsetA, bus } = kernel;
  const { stepS, endAs, endFilterA } = work;
  const { cells } = bank;
  const pairs = bank.timeConstantS.length;
  for (let c = 0; c < cells; c++) {
    state.charge[c] += chargePerAs[c] * endAs[chainOfCell[c]] + chargePerS[c] * stepS;
  }
  if (bank.hasHysteresis) commitHysteresis(kernel, endAs, stepS);
  for (let k = 0; k < pairs; k++) {
    const decay = Math.exp(-stepS / bank.timeConstantS[k]);
    for (let c = k * cells, cell = 0; cell < cells; c++, cell++) {
      state.offsetFilterA[c] = offsetA[cell] + (state.offsetFilterA[c] - offsetA[cell]) * decay;
    }
  }
  copyInto(endFilterA, state.filterA);
  copyInto(work.lastA, bus.currentA);
  bus.bankA = work.endBankA;
  bus.bankV = work.endBankV;
  copyInto(work.lastA, work.firstA);
  kernel.nowS += stepS;
}
