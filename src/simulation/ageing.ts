import { agedBank } from '../bank/aged-bank.js';
import type { Bank } from '../bank/bank.js';
import { type CellFade, capacityLeft, fadeAfterCycle, initialFade } from '../bank/cell-ageing.js';
import type { ModuleAgeing } from '../study/ageing-settings.js';
import type { Journey } from './advance.js';
import { takeAged } from './climate.js';
import { clearUse, createUseRecorder, type UseRecorder, useOfCell } from './use-recorder.js';

/** How far the cells of a bank have aged. */
export interface Ageing {
  /** The bank at the start, at 25 degC. */
  readonly start: Bank;
  readonly ofCell: readonly (ModuleAgeing | undefined)[];
  readonly use: UseRecorder;
  /** Of each cell; stands at nothing where a cell does not age. */
  readonly fade: CellFade[];
  /** Capacity of each cell, fraction of that at the start. */
  readonly left: Float64Array;
  /** Charge that each cell has lost with its capacity, As: what the balance of charge lacks. */
  readonly fadedAs: Float64Array;
  /** Told of the bank before and after its cells have aged, both at the present temperatures. */
  readonly onFade: (before: Bank, after: Bank) => void;
}

/** @param start the bank at the start of its course, at 25 degC */
export function createAgeing(
  start: Bank,
  ofCell: readonly (ModuleAgeing | undefined)[],
  onFade: Ageing['onFade'],
): Ageing {
  const newAs = start.capacityAs.map((capacity, c) => capacity / (1 - (ofCell[c]?.initialFadeFraction ?? 0)));
  return {
    start,
    ofCell,
    use: createUseRecorder(newAs),
    fade: ofCell.map((ageing) => (ageing === undefined ? { calendar: 0, cycle: 0 } : initialFade(ageing))),
    left: new Float64Array(start.cells).fill(1),
    fadedAs: new Float64Array(start.cells),
    onFade,
  };
}

/**
 * Ages every cell by what it went through in the cycle that has ended. Its charge fraction stays, so that of its charge
 *
 *   z (Q - Q')
 *
 * goes with its capacity.
 */
export function ageAfterCycle(journey: Journey, ageing: Ageing): void {
  const { kernel, climate } = journey;
  const { ofCell, use, fade, left, fadedAs } = ageing;
  const { charge } = kernel.state;
  const before = kernel.bank;
  ofCell.forEach((settings, c) => {
    if (settings === undefined) return;
    fade[c] = fadeAfterCycle(fade[c], settings, useOfCell(use, c, before, charge));
    left[c] = Math.min(left[c], capacityLeft(fade[c], settings));
  });
  clearUse(use);
  if (climate === null) throw new RangeError('a bank that ages must have a climate');
  takeAged(journey, climate, agedBank(ageing.start, left));
  const after = kernel.bank;
  for (let c = 0; c < fadedAs.length; c++) fadedAs[c] += charge[c] * (before.capacityAs[c] - after.capacityAs[c]);
  ageing.onFade(before, after);
}
