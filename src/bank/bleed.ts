import { type Bank, BLEED_ABOVE_LOWEST, BLEED_NONE } from './bank.js';
import { FLOW_A } from './protection.js';

/**
 * How far a cell is past the point at which its bleed switches, V (A where the current decides): 0 or more, it switches.
 *
 * `each`: on from the start voltage, off at the stop voltage. `above-lowest`: on from the start voltage if it also stands
 * at least delta above the lowest cell of its module, off at the stop voltage or half of delta. `none`: never. If it
 * bleeds while charging only, it starts with charge current and stops without.
 *
 * @param bleeds the cell bleeds now
 */
export function pastBleedSwitch(
  bank: Bank,
  m: number,
  bleeds: boolean,
  cellV: number,
  lowestV: number,
  currentA: number,
): number {
  const rule = bank.bleedRule[m];
  if (rule === BLEED_NONE) return bleeds ? 0 : Number.NEGATIVE_INFINITY;
  let past = bleeds ? bank.bleedStopV[m] - cellV : cellV - bank.bleedStartV[m];
  if (rule === BLEED_ABOVE_LOWEST) {
    const aboveV = cellV - lowestV;
    const deltaV = bank.bleedDeltaV[m];
    past = bleeds ? Math.max(past, 0.5 * deltaV - aboveV) : Math.min(past, aboveV - deltaV);
  }
  if (bank.bleedWhileChargingOnly[m] === 1) {
    past = bleeds ? Math.max(past, FLOW_A - currentA) : Math.min(past, currentA - FLOW_A);
  }
  return past;
}
