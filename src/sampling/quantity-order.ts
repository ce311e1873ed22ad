import type { QUANTITIES, QuantityName } from '../study/quantities.js';

/** The names of a registry as a tuple, so that the compiler refuses a list that differs from it in any place. */
type NamesOf<Registry extends readonly { readonly name: string }[]> = {
  readonly [Place in keyof Registry]: Registry[Place]['name'];
};

/**
 * The quantities in registry order, the order in which correlated draws are made. Written out because this room takes
 * only types from the study.
 */
export const QUANTITY_ORDER: NamesOf<typeof QUANTITIES> = [
  'capacityAh',
  'resistanceOhm',
  'leakagePerMonth',
  'standbyA',
  'efficiency',
  'arrivalCharge',
  'pathResistanceOhm',
  'jointResistanceOhm',
  'overVoltageV',
  'overVoltageReleaseV',
  'underVoltageV',
  'underVoltageReleaseV',
  'overCurrentChargeA',
  'overCurrentDischargeA',
  'bleedA',
  'bleedStartV',
  'temperatureOffsetK',
  'ageingRate',
  'refusalBelowK',
  'refusalReleaseK',
];

/** One thing per quantity. */
export type PerQuantity<Thing> = Readonly<Record<QuantityName, Thing>>;

/** @returns what `make` gives for each quantity */
export function perQuantity<Thing>(make: (name: QuantityName) => Thing): PerQuantity<Thing> {
  return Object.fromEntries(QUANTITY_ORDER.map((name) => [name, make(name)])) as Record<QuantityName, Thing>;
}
