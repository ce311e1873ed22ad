import { updateEmf } from './chain-emf.js';
import { copyInto, type Kernel, solveKept, updateExtremes } from './kernel.js';

/** Room for the stages of one step; arrays over chains, filters pair by pair (pair * chains + chain). */
export interface StepWork {
  readonly firstA: Float64Array;
  readonly secondA: Float64Array;
  readonly thirdA: Float64Array;
  readonly lastA: Float64Array;
  /** Charge passed since the start of the step, As. */
  readonly passedAs: Float64Array;
  readonly filterA: Float64Array;
  /** At the end of the latest attempt. */
  readonly endAs: Float64Array;
  readonly endFilterA: Float64Array;
  /** Cells whose bleed has been switched at the instant being settled. */
  readonly bleedSpent: Uint8Array;
  /** Bus energy of the latest attempt, into the bank, J. */
  busEnergyJ: number;
  endBankA: number;
  endBankV: number;
  stepS: number;
}

/** Least progress of a step, also of one that ends at an event, s. */
export const LEAST_STEP_S = 0.01;
/** Distance from a branch of the hysteresis at which a cell is taken to be on it. */
const ON_BRANCH = 1e-6;
/** Embedded error of the charge of a chain that a step may leave, as a fraction of its smallest cell. */
const CHARGE_TOLERANCE = 2e-5;
/** The same per second of a step: bounds the error of the mean current of short steps, as in a taper, 1/s. */
const RATE_TOLERANCE = 1.5e-7;

export function createStepWork(kernel: Kernel): StepWork {
  const chains = kernel.emfShiftV.length;
  const filters = kernel.state.filterA.length;
  return {
    firstA: new Float64Array(chains),
    secondA: new Float64Array(chains),
    thirdA: new Float64Array(chains),
    lastA: new Float64Array(chains),
    passedAs: new Float64Array(chains),
    filterA: new Float64Array(filters),
    endAs: new Float64Array(chains),
    endFilterA: new Float64Array(filters),
    bleedSpent: new Uint8Array(kernel.bank.cells),
    busEnergyJ: 0,
    endBankA: 0,
    endBankV: 0,
    stepS: 0,
  };
}

/**
 * Tries one step of `stepS` seconds with pattern and regime kept; the state stays as it is until `commitStep`.
 *
 * The charge of each chain follows the embedded pair of order 3(2)
 *
 *   k1 = I(0), k2 = I(h/2; q = h/2 k1), k3 = I(3h/4; q = 3h/4 k2), q = h (2 k1 + 3 k2 + 4 k3) / 9, k4 = I(h; q)
 *   error = h (-5 k1 + 6 k2 + 8 k3 - 9 k4) / 72
 *
 * whose last evaluation is the first of the next step. Filtered currents follow their exponentials exactly for the
 * current that the stage assumes (constant within stages, linear with the right mean over the step), so no step length
 * is unstable for them.
 *
 * @returns the largest error over the chains, in tolerances; Infinity if the bus has no solution on the way
 * @see Bogacki & Shampine 1989, Appl. Math. Letters 2(4), 321-325
 */
export function tryStep(kernel: Kernel, work: StepWork, stepS: number): number {
  const { bank, point, state, bus } = kernel;
  const { firstA, secondA, thirdA, lastA, passedAs, filterA, endAs, endFilterA } = work;
  const chains = firstA.length;
  work.stepS = stepS;

  const halfS = 0.5 * stepS;
  for (let i = 0; i < chains; i++) passedAs[i] = halfS * firstA[i];
  filterConstant(bank.timeConstantS, halfS, state.filterA, firstA, filterA);
  updateEmf(kernel, halfS, passedAs, filterA);
  if (!solveKept(kernel)) return Number.POSITIVE_INFINITY;
  copyInto(point.currentA, secondA);
  const secondW = point.bankA * point.bankV;

  const laterS = 0.75 * stepS;
  for (let i = 0; i < chains; i++) passedAs[i] = laterS * secondA[i];
  filterConstant(bank.timeConstantS, laterS, state.filterA, secondA, filterA);
  updateEmf(kernel, laterS, passedAs, filterA);
  if (!solveKept(kernel)) return Number.POSITIVE_INFINITY;
  copyInto(point.currentA, thirdA);
  const thirdW = point.bankA * point.bankV;

  for (let i = 0; i < chains; i++) endAs[i] = (stepS / 9) * (2 * firstA[i] + 3 * secondA[i] + 4 * thirdA[i]);
  filterLinear(bank.timeConstantS, stepS, state.filterA, firstA, endAs, endFilterA);
  updateEmf(kernel, stepS, endAs, endFilterA);
  if (!solveKept(kernel)) return Number.POSITIVE_INFINITY;
  copyInto(point.currentA, lastA);
  work.endBankA = point.bankA;
  work.endBankV = point.bankV;
  work.busEnergyJ = (stepS / 9) * (2 * bus.bankA * bus.bankV + 3 * secondW + 4 * thirdW);

  let worst = 0;
  for (let i = 0; i < chains; i++) {
    const errorAs = (stepS / 72) * (-5 * firstA[i] + 6 * secondA[i] + 8 * thirdA[i] - 9 * lastA[i]);
    const error = Math.abs(errorAs) / bank.chainCapacityAs[i];
    if (!(error <= worst)) worst = error;
  }
  return worst / Math.min(CHARGE_TOLERANCE, RATE_TOLERANCE * stepS);
}

/** Filtered currents after `elapsedS` of constant chain currents: F = I + (F0 - I) exp(-t / tau). */
function filterConstant(
  timeConstantS: Float64Array,
  elapsedS: number,
  fromA: Float64Array,
  currentA: Float64Array,
  intoA: Float64Array,
): void {
  const chains = currentA.length;
  for (let k = 0; k < timeConstantS.length; k++) {
    const decay = Math.exp(-elapsedS / timeConstantS[k]);
    for (let i = 0; i < chains; i++) {
      intoA[k * chains + i] = currentA[i] + (fromA[k * chains + i] - currentA[i]) * decay;
    }
  }
}

/**
 * Filtered currents after `elapsedS` of chain currents that run linearly from `firstA` with mean `passedAs / elapsedS`:
 *
 *   I(t) = I0 + s t   =>   F = I0 + (F0 - I0) d + s (t - tau (1 - d)),   d = exp(-t / tau)
 */
export function filterLinear(
  timeConstantS: Float64Array,
  elapsedS: number,
  fromA: Float64Array,
  firstA: Float64Array,
  passedAs: Float64Array,
  intoA: Float64Array,
): void {
  const chains = firstA.length;
  for (let k = 0; k < timeConstantS.length; k++) {
    const tauS = timeConstantS[k];
    const decay = Math.exp(-elapsedS / tauS);
    const ramp = elapsedS - tauS * (1 - decay);
    for (let i = 0; i < chains; i++) {
      const slope = (2 * (passedAs[i] / elapsedS - firstA[i])) / elapsedS;
      intoA[k * chains + i] = firstA[i] + (fromA[k * chains + i] - firstA[i]) * decay + slope * ramp;
    }
  }
}

/**
 * Evaluates the latest attempt at a share `theta` of its step: charge by the cubic through both ends and their currents,
 * filters for that charge. Leaves currents and voltages in `kernel.point` and the extremes of the cells.
 */
export function evaluateWithin(kernel: Kernel, work: StepWork, theta: number): boolean {
  const elapsedS = theta * work.stepS;
  passedWithin(work, theta, work.passedAs);
  filterLinear(kernel.bank.timeConstantS, elapsedS, kernel.state.filterA, work.firstA, work.passedAs, work.filterA);
  updateEmf(kernel, elapsedS, work.passedAs, work.filterA);
  if (!solveKept(kernel)) return false;
  updateExtremes(kernel, kernel.point.currentA, work.filterA);
  return true;
}

/** Charge passed at a share `theta` of the latest attempt (cubic Hermite), As. */
function passedWithin(work: StepWork, theta: number, intoAs: Float64Array): void {
  const { firstA, lastA, endAs, stepS } = work;
  const rest = theta * theta * (3 - 2 * theta);
  const first = theta * (1 - theta) * (1 - theta) * stepS;
  const last = theta * theta * (theta - 1) * stepS;
  for (let i = 0; i < firstA.length; i++) intoAs[i] = rest * endAs[i] + first * firstA[i] + last * lastA[i];
}

/** Makes the end of the latest attempt, which must be what was evaluated last, the present. */
export function commitStep(kernel: Kernel, work: StepWork): void {
  const { bank, state, chainOfCell, chargePerAs, chargePerS, offsetA, bus, point } = kernel;
  const { stepS, endAs, endFilterA } = work;
  const { cells } = bank;
  const pairs = bank.timeConstantS.length;
  for (let c = 0; c < cells; c++) {
    const q = endAs[chainOfCell[c]];
    state.charge[c] += chargePerAs[c] * q + chargePerS[c] * stepS;
    if (bank.hasHysteresis) {
      const h = point.cellHysteresis[c];
      // Close to a branch the exponential no longer matters; on it, it costs nothing.
      state.hysteresis[c] = Math.abs(h) > 1 - ON_BRANCH ? Math.sign(h) : h;
    }
  }
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
