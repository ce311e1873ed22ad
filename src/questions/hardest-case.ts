import type { ColumnValues } from '../outcomes/column-values.js';
import type { HardestCase } from './answers.js';

/**
 * Answers "which bank should I look at?": of one candidate, the sampled bank with the greatest lost capacity.
 *
 * Of banks that lose the same, or have no such figure, the one that loses load on most cycles; then the first.
 *
 * @param lostCapacity in percent
 * @param loadLostCycles on the same instances
 * @param hardest the hardest bank found so far among other candidates, which stands unless beaten
 * @returns null if no bank loses capacity or load
 */
export function harderCase(
  candidate: string,
  lostCapacity: ColumnValues,
  loadLostCycles: ColumnValues,
  hardest: HardestCase | null,
): HardestCase | null {
  let worst = hardest;
  for (let instance = 1; instance <= lostCapacity.instances; instance++) {
    const lostCapacityPercent = lostCapacity.at(instance);
    const lostCycles = loadLostCycles.at(instance);
    if (!((lostCapacityPercent ?? 0) > 0 || (lostCycles ?? 0) > 0)) continue;
    const found = { candidate, instance, lostCapacityPercent, loadLostCycles: lostCycles };
    if (worst === null || isHarder(found, worst)) worst = found;
  }
  return worst;
}

function isHarder(one: HardestCase, other: HardestCase): boolean {
  const capacity = (one.lostCapacityPercent ?? 0) - (other.lostCapacityPercent ?? 0);
  return capacity > 0 || (capacity === 0 && (one.loadLostCycles ?? 0) > (other.loadLostCycles ?? 0));
}
