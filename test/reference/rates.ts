import type { DutySegment } from '../../src/study/study.js';
import type { SlowAgeing } from './ageing.js';
import type { Evaluation } from './evaluation.js';

/** States beyond those of the cells: energy served, Wh, and not supplied, Wh and Ah. */
export const DERIVED_TAIL = 3;

/**
 * Time derivatives of all states of a bank; of the sums that `ageing` keeps too, where cells age.
 *
 *   I_c   = I_terminal - standby - bleed
 *   dz/dt = ((I_c > 0 ? eta I_c : I_c) - leakage) / (3600 Q)
 *   dh/dt = gamma |I_c| / (3600 Q) (sign(I_c) - h)
 *   dv/dt = (R I_c - v) / tau
 */
export function derivativesInto(
  evaluation: Evaluation,
  segment: DutySegment,
  states: Float64Array,
  out: Float64Array,
  ageing: SlowAgeing | null,
): void {
  let number = 0;
  const { layout, packSwitches, bank, bankSwitches } = evaluation;
  const view = evaluation.evaluate(states, segment);
  layout.packs.forEach((pack, k) => {
    const { currentA, standbyA } = view.packs[k];
    pack.cells.forEach((cell, c) => {
      const i = currentA - standbyA - (packSwitches[k].bleeding[c] ? pack.bleedA : 0);
      out[cell.at] = ((i > 0 ? cell.efficiency * i : i) - cell.leakageA) / cell.capacityAs;
      ageing?.ratesInto(number++, i, states[cell.at], out);
      const pull = (cell.hysteresisRate * Math.abs(i)) / cell.capacityAs;
      out[cell.at + 1] = pull * (Math.sign(i) - states[cell.at + 1]);
      for (let p = 0; p < cell.pairs.length; p++) {
        const { resistanceOhm, timeConstantS } = cell.pairs[p];
        out[cell.at + 2 + p] = (resistanceOhm * i - states[cell.at + 2 + p]) / timeConstantS;
      }
    });
  });
  const demandW = bank.loadFactor * segment.loadW;
  const demandA = bank.loadFactor * segment.loadA;
  const served = bankSwitches.loadConnected && view.status === 'served';
  out[layout.stateLength] = served ? (demandW + demandA * view.busV) / 3600 : 0;
  out[layout.stateLength + 1] = served ? 0 : demandW / 3600;
  out[layout.stateLength + 2] = served ? 0 : demandA / 3600;
}
