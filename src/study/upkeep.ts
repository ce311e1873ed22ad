import type { z } from 'zod';
import { amount, count } from './amount.js';
import type { Picked } from './layers.js';
import type { Reading } from './reading.js';
import { exactlyOneOf, section } from './section.js';
import type { Upkeep } from './study.js';
import { renderPath, type StudyPath } from './study-path.js';
import { siFromKey, unitOfKey } from './units.js';

/** The section `upkeep` of the bank or of a candidate: when someone comes to rebalance. */
export const UPKEEP = section({
  every_cycles: count({ atLeast: 1, atMost: 36_500 }, { description: 'A visit after so many cycles.' }).optional(),
  every_days: amount(
    { above: 0, atMost: 36_500 },
    { description: 'A visit at the end of the first cycle at least so many days after the one before.' },
  ).optional(),
  at_drift_percent: amount(
    { above: 0, atMost: 100 },
    { description: 'A visit at the end of a cycle on which drift, of rated capacity, is above this.' },
  ).optional(),
})
  .refine(...exactlyOneOf('every_cycles', 'every_days', 'at_drift_percent'))
  .nullable();

export type UpkeepInput = z.infer<typeof UPKEEP>;

/**
 * @param picked the section with its place; a section of the candidate replaces that of the bank as a whole
 * @param owner path of the candidate
 * @param oneBms a string of the candidate has one BMS, hence no drift between modules
 * @returns the upkeep, null for none
 */
export function resolveUpkeep(
  picked: Picked<UpkeepInput> | undefined,
  owner: StudyPath,
  oneBms: boolean,
  reading: Reading,
): Upkeep | null {
  if (picked === undefined) return null;
  const note = (key: string, value: string): void => {
    reading.origins.push({ path: renderPath([...owner, key]), value, unit: unitOfKey(key), source: picked.source });
  };
  if (picked.value === null) {
    note('upkeep', 'none');
    return null;
  }
  const { every_cycles: everyCycles, every_days: everyDays, at_drift_percent: driftPercent } = picked.value;
  if (everyCycles !== undefined) {
    note('upkeep.every_cycles', String(everyCycles));
    return { everyCycles };
  }
  if (everyDays !== undefined) {
    note('upkeep.every_days', String(everyDays));
    return { everyS: siFromKey('every_days', everyDays) };
  }
  if (driftPercent === undefined) return null;
  if (oneBms) {
    // Said for the whole bank it holds for those candidates that can drift.
    if (picked.source === 'study') {
      reading.fault(
        [...picked.path, 'at_drift_percent'],
        'absent where a string has one BMS: no drift between modules',
      );
    }
    return null;
  }
  note('upkeep.at_drift_percent', String(driftPercent));
  return { driftFraction: siFromKey('at_drift_percent', driftPercent) };
}
