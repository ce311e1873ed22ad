import type { Bank } from '../bank/bank.js';
import type { BankState } from '../bank/bank-state.js';

/**
 * Drift of a bank now, Ah: spread of missing charge within a series path.
 *
 *   m = Q (1 - z) per cell; of a module, the largest of its cells
 *
 * A current common to a path leaves every difference of m as it was, so drift does not depend on how full the bank is.
 */
export interface Drift {
  /** Between the modules of a string, worst string; null with one module per string. */
  readonly moduleAh: number | null;
  /** Between the cells along a string, worst string. */
  readonly cellAh: number;
}

export function driftNow(bank: Bank, state: BankState): Drift {
  let worstModuleAh = 0;
  let worstCellAh = 0;
  for (let string = 0; string < bank.strings; string++) {
    let [mostModule, leastModule, mostCell, leastCell] = [-Infinity, Infinity, -Infinity, Infinity];
    for (let m = string * bank.positions; m < (string + 1) * bank.positions; m++) {
      let largest = Number.NEGATIVE_INFINITY;
      for (let c = bank.cellStart[m]; c < bank.cellStart[m + 1]; c++) {
        const missing = bank.capacityAs[c] * (1 - state.charge[c]);
        largest = Math.max(largest, missing);
        mostCell = Math.max(mostCell, missing);
        leastCell = Math.min(leastCell, missing);
      }
      mostModule = Math.max(mostModule, largest);
      leastModule = Math.min(leastModule, largest);
    }
    worstModuleAh = Math.max(worstModuleAh, (mostModule - leastModule) / 3600);
    worstCellAh = Math.max(worstCellAh, (mostCell - leastCell) / 3600);
  }
  return { moduleAh: bank.positions > 1 ? worstModuleAh : null, cellAh: worstCellAh };
}

/**
 * Growth of a daily series per 30 days: the last 30-day mean less the first one after day 30, over the time between their
 * middles; of 7-day means where the horizon is shorter than 90 days, from the start where it is shorter than 44.
 *
 * @param values one per cycle
 * @param cycleDays mean length of a cycle, days
 * @returns unit of `values` per 30 days; null if two means do not fit
 */
export function growthPerMonth(values: Float64Array, cycleDays: number): number | null {
  const days = values.length * cycleDays;
  const spanDays = days >= 90 ? 30 : 7;
  const startDay = days >= 30 + 2 * spanDays ? 30 : 0;
  const span = Math.max(1, Math.round(spanDays / cycleDays));
  const start = Math.round(startDay / cycleDays);
  const last = values.length - span;
  if (last < start + span) return null;
  const difference = meanOf(values, last, last + span) - meanOf(values, start, start + span);
  return (30 * difference) / ((last - start) * cycleDays);
}

export function meanOf(values: Float64Array, from: number, to: number): number {
  let sum = 0;
  for (let index = from; index < to; index++) sum += values[index];
  return sum / (to - from);
}
