import { type Bank, BLEED_ABOVE_LOWEST, BLEED_NONE } from './bank.js';
import { FLOW_A } from './protection.js';

/**
 * Whether a cell bleeds, from its measured voltage and whether it did so before.
 *
 * `each`: on from the start voltage, off at the stop voltage. `above-lowest`: on from the start voltage if it also stands
 * at least delta above the lowest cell of its module, off at the stop voltage or half of delta. `none`: never.
 */
export function bleedsAfter(
  bank: Bank,
  m: number,
  wasBleeding: boolean,
  cellV: number,
  lowestV: number,
  currentA: number,
): boolean {
  const rule = bank.bleedRule[m];
  if (rule === BLEED_NONE) return false;
  if (bank.bleedWhileChargingOnly[m] === 1 && currentA <= FLOW_A) return false;
  const aboveV = rule === BLEED_ABOVE_LOWEST ? cellV - lowestV : Number.POSITIVE_INFINITY;
  const deltaV = bank.bleedDeltaV[m];
  if (wasBleeding) return cellV > bank.bleedStopV[m] && aboveV > 0.5 * deltaV;
  return cellV >= bank.bleedStartV[m] && aboveV >= deltaV;
}
