import type { Bank } from '../bank/bank.js';
import {
  type BankEqualiser,
  deviceCurrentA,
  differenceV,
  equaliserSourcesInto,
  isAtWork,
  OFF,
} from '../bank/equaliser.js';
import type { Journey } from './advance.js';
import { evaluateWithin } from './step.js';

/** Gauss's two points in a step. */
const GAUSS = [0.5 - Math.sqrt(1 / 12), 0.5 + Math.sqrt(1 / 12)] as const;

/** What equalisers did in a step. */
export interface EqualiserStep {
  /** Current into each module beside that of its leads: mean over the step, and half of its rise, A. */
  readonly meanA: Float64Array;
  readonly riseA: Float64Array;
  /** Charge taken from modules, and the part of it taken from the one of two that missed more, As. */
  movedAs: number;
  counterAs: number;
  /** Taken less delivered, standby included, J. */
  lostJ: number;
}

export function createEqualiserStep(chains: number): EqualiserStep {
  const floats = (): Float64Array => new Float64Array(chains);
  return { meanA: floats(), riseA: floats(), movedAs: 0, counterAs: 0, lostJ: 0 };
}

/** Looks into the latest attempt at two points; leaves its end as what was evaluated last. */
export function lookAtEqualisers(step: EqualiserStep, equaliser: BankEqualiser, journey: Journey): void {
  const { kernel, work } = journey;
  const { bank, state, point } = kernel;
  const { meanA, riseA } = step;
  if (state.equaliserRegion.every((region) => region === OFF)) {
    lookAtRest(step, equaliser, journey);
    return;
  }
  const [first, second] = [new Float64Array(meanA.length), new Float64Array(meanA.length)];
  step.movedAs = 0;
  step.counterAs = 0;
  step.lostJ = 0;
  GAUSS.forEach((theta, g) => {
    evaluateWithin(kernel, work, theta);
    const sourceA = g === 0 ? first : second;
    equaliserSourcesInto(equaliser, state, point.emfV, point.currentA, sourceA);
    const spanS = 0.5 * work.stepS;
    for (let i = 0; i < sourceA.length; i++) {
      step.lostJ -= spanS * sourceA[i] * (point.emfV[i] + equaliser.moduleOhm[i] * point.currentA[i]);
    }
    for (let k = 0; k < equaliser.devices; k++) {
      if (!isAtWork(equaliser, state.conduction, k)) continue;
      const atV = differenceV(equaliser, point.emfV, point.currentA, k);
      const amps = deviceCurrentA(equaliser, state.equaliserRegion[k], atV);
      step.movedAs += spanS * Math.abs(amps);
      const [from, to] = amps > 0 ? [equaliser.upper[k], equaliser.lower[k]] : [equaliser.lower[k], equaliser.upper[k]];
      if (amps !== 0 && missingAs(bank, state.charge, from) > missingAs(bank, state.charge, to)) {
        step.counterAs += spanS * Math.abs(amps);
      }
    }
  });
  evaluateWithin(kernel, work, 1);
  for (let i = 0; i < meanA.length; i++) {
    meanA[i] = 0.5 * (first[i] + second[i]);
    riseA[i] = 0.5 * Math.sqrt(3) * (second[i] - first[i]);
  }
}

/** All devices are at rest: what they draw by themselves is valued at the end of the step, without looking into it. */
function lookAtRest(step: EqualiserStep, equaliser: BankEqualiser, { kernel, work }: Journey): void {
  const { state, point } = kernel;
  const { meanA, riseA } = step;
  step.movedAs = 0;
  step.counterAs = 0;
  step.lostJ = 0;
  equaliserSourcesInto(equaliser, state, point.emfV, point.currentA, meanA);
  riseA.fill(0);
  for (let i = 0; i < meanA.length; i++) {
    step.lostJ -= work.stepS * meanA[i] * (point.emfV[i] + equaliser.moduleOhm[i] * point.currentA[i]);
  }
}

/** Missing charge of module `m`: the largest of its cells, As. */
function missingAs(bank: Bank, charge: Float64Array, m: number): number {
  let largest = Number.NEGATIVE_INFINITY;
  for (let c = bank.cellStart[m]; c < bank.cellStart[m + 1]; c++) {
    largest = Math.max(largest, bank.capacityAs[c] * (1 - charge[c]));
  }
  return largest;
}
