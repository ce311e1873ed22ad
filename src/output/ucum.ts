/** UCUM codes of the units that are printed; a month is 30 days, unlike UCUM's. */
const CODES: Readonly<Record<string, string>> = {
  '': '1',
  '%': '%',
  points: '%',
  '%/month': '%/(30.d)',
  Ah: 'A.h',
  'Ah/day': 'A.h/d',
  kWh: 'kW.h',
  V: 'V',
  mV: 'mV',
  A: 'A',
  h: 'h',
  mA: 'mA',
  mOhm: 'mOhm',
  cycle: '{cycle}',
  cycles: '{cycle}',
  'per cycle': '/{cycle}',
  'per year': '/(365.d)',
  days: 'd',
  'min/day': 'min/d',
};

/**
 * Code of a unit in the Unified Code for Units of Measure.
 *
 * @param unit as printed
 * @throws RangeError if the unit has no code here
 * @see Schadow & McDonald, The Unified Code for Units of Measure
 */
export function ucumCode(unit: string): string {
  const code = Object.hasOwn(CODES, unit) ? CODES[unit] : undefined;
  if (code === undefined) throw new RangeError(`no UCUM code for the unit "${unit}"`);
  return code;
}
