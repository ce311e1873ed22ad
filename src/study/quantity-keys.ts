import type { QuantityName } from './quantities.js';

/** Where each quantity stands in a stock of the study language; the names that correlations use. */
export const QUANTITY_KEYS = {
  capacityAh: 'capacity_Ah',
  resistanceOhm: 'cell_resistance_mOhm',
  leakagePerMonth: 'leakage_percent_per_month',
  standbyA: 'standby_mA',
  efficiency: 'coulombic_efficiency',
  arrivalCharge: 'arrival_charge_percent',
  pathResistanceOhm: 'path_resistance_mOhm',
  jointResistanceOhm: 'joint_resistance_mOhm',
  overVoltageV: 'bms.over_voltage.cell_V',
  overVoltageReleaseV: 'bms.over_voltage.release_V',
  underVoltageV: 'bms.under_voltage.cell_V',
  underVoltageReleaseV: 'bms.under_voltage.release_V',
  overCurrentChargeA: 'bms.over_current.charge_A',
  overCurrentDischargeA: 'bms.over_current.discharge_A',
  bleedA: 'bms.bleed.current_mA',
  bleedStartV: 'bms.bleed.start_V',
  temperatureOffsetK: 'temperature_offset_K',
  ageingRate: 'ageing.rate',
  refusalBelowK: 'bms.charge_refusal.below_degC',
  refusalReleaseK: 'bms.charge_refusal.release_degC',
} as const satisfies Record<QuantityName, string>;

const NAMES_BY_KEY: ReadonlyMap<string, QuantityName> = new Map(
  (Object.keys(QUANTITY_KEYS) as QuantityName[]).map((name) => [QUANTITY_KEYS[name], name]),
);

/** @returns the quantity that a key of a stock names, undefined if it names none */
export function quantityOfKey(key: string): QuantityName | undefined {
  return NAMES_BY_KEY.get(key);
}
