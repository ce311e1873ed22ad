import type { Bank } from '../bank/bank.js';
import type { CellUse } from '../bank/cell-ageing.js';
import { REFERENCE_K } from '../bank/temperature.js';
import type { Journey } from './advance.js';

/** Current from which a cell counts as being charged, as a fraction of its capacity per hour (own choice). */
const CHARGED_RATE = 0.01;

// Places of sums over time, those of the bank, then those of each cell.
const ELAPSED_S = 0;
const AMBIENT_KS = 1;
const SINGLES = 2;
const THROUGHPUT_AS = 0;
const CHARGED_AS = 1;
const CHARGED_S = 2;
const CHARGE_S = 3;
const OF_CELL = 4;

/** Watches what every cell goes through in a cycle, as far as ageing asks for it. */
export interface UseRecorder {
  /** Capacity of each cell when new, As. */
  readonly newAs: Float64Array;
  readonly sums: Float64Array;
  readonly atBurst: Float64Array;
  readonly mostCharge: Float64Array;
  readonly leastCharge: Float64Array;
}

/** @param newAs capacity of each cell when new, As */
export function createUseRecorder(newAs: Float64Array): UseRecorder {
  const cells = newAs.length;
  const sums = new Float64Array(SINGLES + OF_CELL * cells);
  return {
    newAs,
    sums,
    atBurst: new Float64Array(sums.length),
    mostCharge: new Float64Array(cells).fill(Number.NEGATIVE_INFINITY),
    leastCharge: new Float64Array(cells).fill(Number.POSITIVE_INFINITY),
  };
}

/**
 * Takes a step before it is committed. The current of a cell is that of its chain less standby and bleed; a step counts
 * with its mean current, and with the charge fraction at its middle.
 */
export function recordUse(recorder: UseRecorder, { kernel, work, climate }: Journey, stepS: number): void {
  const { newAs, sums, mostCharge, leastCharge } = recorder;
  const { chainOfCell, chargePerAs, chargePerS, offsetA, state } = kernel;
  const { charge } = state;
  const { endAs } = work;
  sums[ELAPSED_S] += stepS;
  sums[AMBIENT_KS] += (climate?.ambientK ?? REFERENCE_K) * stepS;
  const chargedAsPerCapacity = (CHARGED_RATE * stepS) / 3600;
  for (let c = 0, at = SINGLES; c < charge.length; c++, at += OF_CELL) {
    const chainAs = endAs[chainOfCell[c]];
    const passedAs = chainAs - offsetA[c] * stepS;
    sums[at + THROUGHPUT_AS] += Math.abs(passedAs);
    if (passedAs > chargedAsPerCapacity * newAs[c]) {
      sums[at + CHARGED_AS] += passedAs;
      sums[at + CHARGED_S] += stepS;
    }
    const now = charge[c];
    sums[at + CHARGE_S] += (now + 0.5 * (chargePerAs[c] * chainAs + chargePerS[c] * stepS)) * stepS;
    if (now > mostCharge[c]) mostCharge[c] = now;
    if (now < leastCharge[c]) leastCharge[c] = now;
  }
}

/** A burst of switching begins: remembers the sums, so that a leap can add to them in proportion. */
export function beginBurstUse({ sums, atBurst }: UseRecorder): void {
  atBurst.set(sums);
}

/** Adds `ratio` times what the burst has summed up. */
export function recordUseLeap({ sums, atBurst }: UseRecorder, ratio: number): void {
  for (let at = 0; at < sums.length; at++) sums[at] += ratio * (sums[at] - atBurst[at]);
}

/**
 * What cell `c` went through since the recorder was cleared. A cycle of no length leaves everything as it was.
 *
 * @param charge of all cells now, at the end of the cycle
 */
export function useOfCell(
  { newAs, sums, ...extremes }: UseRecorder,
  c: number,
  bank: Bank,
  charge: Float64Array,
): CellUse {
  const at = SINGLES + OF_CELL * c;
  const elapsedS = sums[ELAPSED_S];
  const most = Math.max(extremes.mostCharge[c], charge[c]);
  const least = Math.min(extremes.leastCharge[c], charge[c]);
  const chargedS = sums[at + CHARGED_S];
  const ambientK = elapsedS > 0 ? sums[AMBIENT_KS] / elapsedS : REFERENCE_K;
  return {
    durationS: elapsedS,
    equivalentCycles: sums[at + THROUGHPUT_AS] / 2 / newAs[c],
    meanCharge: elapsedS > 0 ? sums[at + CHARGE_S] / elapsedS : charge[c],
    depth: most - least,
    ratePerH: chargedS > 0 ? (3600 * sums[at + CHARGED_AS]) / chargedS / newAs[c] : 0,
    temperatureK: ambientK + bank.temperature.offsetK[bank.moduleOfCell[c]],
  };
}

/** Begins another cycle. */
export function clearUse({ sums, mostCharge, leastCharge }: UseRecorder): void {
  sums.fill(0);
  mostCharge.fill(Number.NEGATIVE_INFINITY);
  leastCharge.fill(Number.POSITIVE_INFINITY);
}
