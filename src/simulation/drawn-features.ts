import type { Bank } from '../bank/bank.js';
import { DRAWN_FEATURES } from '../measures/drawn-features.js';

type FeatureName = (typeof DRAWN_FEATURES)[number]['name'];

/** What was drawn for each slot, slot by slot in the order of `DRAWN_FEATURES`. */
export function drawnFeatures(bank: Bank): number[] {
  const values: number[] = [];
  for (let m = 0; m < bank.modules; m++) {
    const first = bank.cellStart[m];
    const end = bank.cellStart[m + 1];
    const cells = (of: Float64Array): Float64Array => of.subarray(first, end);
    const sum = (of: Float64Array): number => of.reduce((total, value) => total + value, 0);
    const capacity = cells(bank.capacityAs);
    const charge = cells(bank.arrivalCharge).reduce((total, z, k) => total + z * capacity[k], 0);
    const features: Record<FeatureName, number> = {
      capacity_Ah: Math.min(...capacity) / 3600,
      resistance_mOhm: 1000 * (sum(cells(bank.resistanceOhm)) + bank.pathOhm[m]),
      standby_mA: 1000 * bank.standbyA[m],
      leakage_mA: (1000 * sum(cells(bank.leakageA))) / (end - first),
      efficiency: sum(cells(bank.efficiency)) / (end - first),
      arrival_charge_percent: (100 * charge) / sum(capacity),
      over_voltage_V: bank.overVoltageV[m],
      under_voltage_V: bank.underVoltageV[m],
    };
    values.push(...DRAWN_FEATURES.map(({ name }) => features[name]));
  }
  return values;
}
