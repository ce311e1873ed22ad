import type { NominalModule } from './bank-module.js';
import type { Candidate, Duty, DutySegment, Study } from './study.js';
import { inUnitOfKey } from './units.js';

/** Levels that no disconnect of a bank of these cells has, V per cell [own choice]. */
const DISCONNECT_CELL_V = { least: 2, most: 3.4 } as const;
const RECONNECT_CELL_V = { least: 2, most: 3.65 } as const;
/** Nominal voltage of a lithium iron phosphate cell, V. */
const CELL_V = 3.2;
/** Below it lithium may plate on the anode of a cell that is charged, K [common practice, no source]. */
const FREEZING_K = 273.15;
/** Ambient where a segment does not say otherwise, K. */
const REFERENCE_K = 298.15;

type Strings = readonly (readonly NominalModule[])[];
type Warn = (text: string) => void;

/** Warns of a disconnect or reconnection that is meant for a bank of other voltage. */
export function warnOfDisconnect({ load }: Candidate, strings: Strings, warn: Warn): void {
  if (load.disconnectV === null) return;
  const cells = cellsInSeries(strings);
  const look = (
    key: string,
    volts: number,
    { least, most }: { readonly least: number; readonly most: number },
  ): void => {
    if (volts >= least * cells && volts <= most * cells) return;
    warn(
      `load: ${key}, ${rounded(volts)} V, lies outside ${rounded(least * cells)} to ${rounded(most * cells)} V, where ` +
        `${cells} cells in series have use for it: was it meant for a bank of other voltage?`,
    );
  };
  look('disconnect_V', load.disconnectV, DISCONNECT_CELL_V);
  look('reconnect_V', load.reconnectV, RECONNECT_CELL_V);
}

/** Warns where modules are charged below 0 degC whose BMS does not refuse it. */
export function warnOfColdCharge({ parts }: Duty, { slotOffsetK }: Candidate, strings: Strings, warn: Warn): void {
  const charging = parts.flatMap(({ cycles }) => cycles.flat()).filter(mayCharge);
  const coldestK = charging.reduce((least, { ambientK }) => Math.min(least, ambientK ?? REFERENCE_K), Infinity);
  const coldestOf = new Map<string, number>();
  for (const [s, string] of strings.entries()) {
    for (const [p, { stock, temperatureOffsetK, refusesCold }] of string.entries()) {
      const temperatureK = coldestK + (slotOffsetK?.[s]?.[p] ?? 0) + temperatureOffsetK;
      if (refusesCold || temperatureK >= FREEZING_K) continue;
      coldestOf.set(stock, Math.min(coldestOf.get(stock) ?? Infinity, temperatureK));
    }
  }
  for (const [stock, temperatureK] of coldestOf) {
    warn(
      `stock ${stock}: modules are charged down to ${rounded(inUnitOfKey('ambient_degC', temperatureK))} degC, and no ` +
        'charge_refusal stops it: below 0 degC lithium may plate and damage cells, which no measure here tells; state ' +
        'the charge_refusal of the BMS, or keep the bank warm; the limits of the maker decide',
    );
  }
}

/** Warns of a charger that can give more than the BMSs let in. */
export function warnOfChargerBeyondBms(study: Study, candidate: Candidate, strings: Strings, warn: Warn): void {
  if (!isChargerBeyondBms(study, candidate, strings)) return;
  const givenA = rounded(mostChargeA(study.duty, candidate, strings));
  warn(
    `the charger may give ${givenA} A, more than the ${rounded(chargeLimitA(candidate, strings))} A at ` +
      'which the over-current limits of the strings trip: charges end by BMS; lower limit_A of the charger',
  );
}

/** @returns whether the charger can give more than the over-current limits of all strings let in */
export function isChargerBeyondBms(study: Study, candidate: Candidate, strings: Strings): boolean {
  return mostChargeA(study.duty, candidate, strings) > chargeLimitA(candidate, strings);
}

/** Greatest current that the charger gives in this duty, A; powers at 3.2 V a cell. */
function mostChargeA({ parts, chargeFactor }: Duty, { charger }: Candidate, strings: Strings): number {
  const bankV = CELL_V * cellsInSeries(strings);
  const currents = parts
    .flatMap(({ cycles }) => cycles.flat())
    .map(({ chargeW }) => (chargeW === null ? Infinity : (chargeFactor.nominal * chargeW) / bankV));
  return Math.min(charger.limitA, Math.max(...currents));
}

/** Sum over strings of their lowest limit; where positions are tied, the lowest sum over a position. */
function chargeLimitA({ wiring }: Candidate, strings: Strings): number {
  const limits = strings.map((string) => string.map(({ overCurrentChargeA }) => overCurrentChargeA));
  const sum = (values: readonly number[]): number => values.reduce((total, value) => total + value, 0);
  if (wiring === 'native') return sum(limits.map(([first]) => first ?? 0));
  if (wiring === 'strings') return sum(limits.map((string) => Math.min(...string)));
  return Math.min(...(limits[0] ?? []).map((_, p) => sum(limits.map((string) => string[p] ?? 0))));
}

function mayCharge({ chargeW }: DutySegment): boolean {
  return chargeW === null || chargeW > 0;
}

function cellsInSeries(strings: Strings): number {
  return strings[0]?.reduce((sum, { cells }) => sum + cells, 0) ?? 0;
}

function rounded(value: number): number {
  return Number(value.toFixed(3));
}
