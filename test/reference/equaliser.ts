import type { EqualiserSettings } from '../../src/study/study.js';
import { eliminate } from './network.js';

/** One device between two neighbouring modules of a string, by their numbers in the bank. */
export interface Device {
  readonly lower: number;
  readonly upper: number;
}

export function devicesOf(strings: number, positions: number): Device[] {
  return Array.from({ length: strings * positions }, (_, lower) => ({ lower, upper: lower + 1 })).filter(
    ({ upper }) => upper % positions !== 0,
  );
}

/** Current taken from the module of higher voltage, A; negative where that is the lower module. */
export function deviceCurrentA({ currentA, startV, fullV }: EqualiserSettings, upperLessLowerV: number): number {
  const share = (Math.abs(upperLessLowerV) - startV) / (fullV - startV);
  return Math.sign(upperLessLowerV) * currentA * Math.min(1, Math.max(0, share));
}

/**
 * Current into each module from the devices at its posts, A.
 *
 * @param amps taken by each device; null where it rests
 */
export function intoModulesA(
  { efficiency, standbyA }: EqualiserSettings,
  devices: readonly Device[],
  amps: readonly (number | null)[],
  modules: number,
): number[] {
  const intoA = new Array<number>(modules).fill(0);
  devices.forEach(({ lower, upper }, k) => {
    const taken = amps[k];
    if (taken === null) return;
    const [giver, taker] = taken > 0 ? [upper, lower] : [lower, upper];
    intoA[giver] -= Math.abs(taken) + standbyA;
    intoA[taker] += efficiency * Math.abs(taken) - standbyA;
  });
  return intoA;
}

/** Mismatch that counts as none, A. */
const AGREED_A = 1e-10;
const PROBE_A = 1e-5;

/**
 * Currents that agree with the voltages that they lead to: Newton's method on a mismatch that is made of straight pieces,
 * its slopes by small changes of one current after the other, shortened until it gets better.
 *
 * @param mismatch current less the one that the voltages ask for, A
 * @throws Error if no agreement is found
 */
export function agreeingCurrents(start: readonly number[], mismatch: (amps: readonly number[]) => number[]): number[] {
  let amps = [...start];
  let off = mismatch(amps);
  for (let round = 0; round < 60; round++) {
    if (largest(off) < AGREED_A) return amps;
    const columns = amps.map((_, k) => {
      const probed = mismatch(amps.map((each, j) => (j === k ? each + PROBE_A : each)));
      return probed.map((value, j) => (value - off[j]) / PROBE_A);
    });
    const rows = off.map((value, j) => [...columns.map((column) => column[j]), value]);
    eliminate(rows);
    const step = rows.map((row) => row[row.length - 1]);
    let share = 1;
    for (;;) {
      const next = amps.map((each, k) => each - share * step[k]);
      const nextOff = mismatch(next);
      if (largest(nextOff) < largest(off) || share < 1e-3) {
        amps = next;
        off = nextOff;
        break;
      }
      share /= 2;
    }
  }
  throw new Error(`the currents of equalisers do not agree: ${off.join(', ')} A`);
}

const largest = (values: readonly number[]): number => Math.max(0, ...values.map(Math.abs));
