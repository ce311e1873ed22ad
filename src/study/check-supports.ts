import type { QuantityName } from './quantities.js';
import { QUANTITY_KEYS } from './quantity-keys.js';
import type { Reading } from './reading.js';
import type { ResolvedSpread } from './resolve-spread.js';
import type { StudyPath } from './study-path.js';
import { inUnitOfKey, unitOfKey } from './units.js';

type Bound =
  | 'above 0'
  | '0 or more'
  | 'above 0 and at most 1'
  | 'from 0 to 1'
  | 'from -50 to 50 K'
  | 'from -60 to 20 degC';

/** Values a quantity of a real module can have. */
const POSSIBLE: Readonly<Record<QuantityName, Bound>> = {
  capacityAh: 'above 0',
  resistanceOhm: 'above 0',
  leakagePerMonth: '0 or more',
  standbyA: '0 or more',
  efficiency: 'above 0 and at most 1',
  arrivalCharge: 'from 0 to 1',
  pathResistanceOhm: '0 or more',
  jointResistanceOhm: '0 or more',
  overVoltageV: 'above 0',
  overVoltageReleaseV: 'above 0',
  underVoltageV: 'above 0',
  underVoltageReleaseV: 'above 0',
  overCurrentChargeA: 'above 0',
  overCurrentDischargeA: 'above 0',
  bleedA: '0 or more',
  bleedStartV: 'above 0',
  temperatureOffsetK: 'from -50 to 50 K',
  ageingRate: '0 or more',
  refusalBelowK: 'from -60 to 20 degC',
  refusalReleaseK: 'from -60 to 20 degC',
};

/** Least and greatest value, in the units of the resolved study. */
const ENDS: Readonly<Record<Bound, readonly [number, number]>> = {
  'above 0': [0, Number.POSITIVE_INFINITY],
  '0 or more': [0, Number.POSITIVE_INFINITY],
  'above 0 and at most 1': [0, 1],
  'from 0 to 1': [0, 1],
  'from -50 to 50 K': [-50, 50],
  'from -60 to 20 degC': [213.15, 293.15],
};

/** Sums of decimals reach an end only up to rounding. */
const ROUNDING = 1e-12;

/**
 * Refuses spreads that can give an impossible value: nothing is clipped when modules are drawn.
 *
 * @param measured quantities left out, since faults of measured values are told where they stand
 */
export function checkSupports(
  owner: StudyPath,
  spreads: Readonly<Record<QuantityName, ResolvedSpread>>,
  reading: Reading,
  measured: readonly QuantityName[] = [],
): void {
  for (const name of Object.keys(POSSIBLE) as QuantityName[]) {
    const { lower, upper } = spreads[name];
    const fault = measured.includes(name) ? undefined : impossibleValue(name, lower, upper);
    if (fault === undefined) continue;
    reading.faultWith(
      [...owner, ...QUANTITY_KEYS[name].split('.')],
      `must be spread so that every value is ${fault.rule} (levels summed, unbounded laws cut at 5 sd), got ${fault.shown}`,
    );
  }
}

/** @returns the rule that a quantity breaks somewhere between two values, with these in words; undefined if none */
export function impossibleValue(
  name: QuantityName,
  lower: number,
  upper: number,
): { readonly rule: string; readonly shown: string } | undefined {
  const bound = POSSIBLE[name];
  const [least, most] = ENDS[bound];
  const lowFails = bound.startsWith('above') ? !(lower > 0) : !(lower >= least - ROUNDING);
  const highFails = !(upper <= most + ROUNDING);
  if (!lowFails && !highFails) return undefined;
  const key = QUANTITY_KEYS[name];
  const shown = `${round(inUnitOfKey(key, lower))} to ${round(inUnitOfKey(key, upper))} ${unitOfKey(key)}`.trim();
  return { rule: bound === 'from 0 to 1' ? 'from 0 to 100 %' : bound, shown };
}

function round(value: number): number {
  return Number(value.toPrecision(5));
}
