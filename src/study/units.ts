const SECONDS_PER_HOUR = 3600;

/** A month of the study language, days. */
const DAYS_PER_MONTH = 30;

interface KeyUnit {
  readonly suffix: string;
  readonly unit: string;
  readonly toSi: (value: number) => number;
  /** Of a difference of two values, where it is another. */
  readonly ofDifference?: { readonly unit: string; readonly toSi: (value: number) => number };
}

const same = (value: number): number => value;
// Divisions, not factors: 1.5 / 1000 is the double nearest to 0.0015, 1.5 * 0.001 need not be.
const thousandth = (value: number): number => value / 1000;
const hundredth = (value: number): number => value / 100;

/** Units by the last words of a key; longer suffixes stand before those they end in. */
const KEY_UNITS: readonly KeyUnit[] = [
  { suffix: '_percent_per_month', unit: '%/month', toSi: hundredth },
  { suffix: '_percent', unit: '%', toSi: hundredth, ofDifference: { unit: 'points', toSi: hundredth } },
  { suffix: '_mOhm', unit: 'mOhm', toSi: thousandth },
  { suffix: '_Ah', unit: 'Ah', toSi: same },
  { suffix: '_mA', unit: 'mA', toSi: thousandth },
  { suffix: '_mV', unit: 'mV', toSi: thousandth },
  { suffix: '_A', unit: 'A', toSi: same },
  { suffix: '_V', unit: 'V', toSi: same },
  { suffix: '_W', unit: 'W', toSi: same },
  { suffix: '_h', unit: 'h', toSi: (hours) => hours * SECONDS_PER_HOUR },
  { suffix: '_s', unit: 's', toSi: same },
  { suffix: '_K', unit: 'K', toSi: same },
  {
    suffix: '_degC',
    unit: 'degC',
    toSi: (celsius) => celsius + 273.15,
    ofDifference: { unit: 'K', toSi: same },
  },
  { suffix: '_kJ_per_mol', unit: 'kJ/mol', toSi: (kilojoules) => kilojoules * 1000 },
  { suffix: '_days', unit: 'days', toSi: (days) => days * 24 * SECONDS_PER_HOUR },
];

/** @returns the unit that a key of the study names, empty if it names none */
export function unitOfKey(key: string): string {
  return unitFor(key)?.unit ?? '';
}

/** @returns the value of a key in the units of the resolved study: SI with charge in Ah, shares as fractions */
export function siFromKey(key: string, value: number): number {
  return unitFor(key)?.toSi(value) ?? value;
}

/** @returns a value of the resolved study in the unit that a key of the study names; inverse of `siFromKey` */
export function inUnitOfKey(key: string, si: number): number {
  const zero = siFromKey(key, 0);
  return (si - zero) / (siFromKey(key, 1) - zero);
}

/** @returns the unit of a difference of two values of a key: points for percent, K for degC */
export function unitOfDifference(key: string): string {
  return unitFor(key)?.ofDifference?.unit ?? unitOfKey(key);
}

/** @returns a difference of two values of a key in the units of the resolved study */
export function differenceFromKey(key: string, value: number): number {
  return unitFor(key)?.ofDifference?.toSi(value) ?? siFromKey(key, value);
}

/** @returns a difference in the unit that a key of the study names; inverse of `differenceFromKey` */
export function differenceInUnitOfKey(key: string, si: number): number {
  return si / differenceFromKey(key, 1);
}

/** @returns hours in seconds */
export function secondsFromHours(hours: number): number {
  return hours * SECONDS_PER_HOUR;
}

/**
 * Constant current that takes a share of a capacity in a month.
 *
 *   i = share Q / (30 days x 24 h)
 *
 * @returns amperes, for `capacityAh` in Ah and `fractionPerMonth` as a fraction
 */
export function leakageAFromMonth(fractionPerMonth: number, capacityAh: number): number {
  return (fractionPerMonth * capacityAh) / (DAYS_PER_MONTH * 24);
}

function unitFor(key: string): KeyUnit | undefined {
  return KEY_UNITS.find(({ suffix }) => key.endsWith(suffix) || key === suffix.slice(1));
}
