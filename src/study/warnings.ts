import { type NominalModule, nominalModules } from './bank-module.js';
import { countWarnings } from './rating-warnings.js';
import type { Candidate, Study } from './study.js';

/** Float this close below a release keeps the latch of an over-voltage trip from clearing, V per cell. */
const FLOAT_MARGIN_V = 0.02;

/** @returns what an author should know of a study that runs all the same, one sentence each */
export function studyWarnings(study: Study): readonly string[] {
  const warnings = new Map<string, string[]>();
  const warn = (candidate: Candidate, text: string): void => {
    warnings.set(text, [...(warnings.get(text) ?? []), candidate.key]);
  };
  for (const candidate of study.candidates) {
    const strings = nominalModules(study, candidate);
    warnOfFloat(candidate, strings, (text) => warn(candidate, text));
    warnOfAbsorption(candidate, strings, (text) => warn(candidate, text));
    for (const text of countWarnings(study, candidate)) warn(candidate, text);
  }
  const ofCandidates = [...warnings].map(([text, keys]) => `${text} (${keys.join(', ')})`);
  return [...ofCandidates, ...peakWarnings(study), ...bleedInForce(study)];
}

function warnOfFloat(
  { charger }: Candidate,
  strings: readonly (readonly NominalModule[])[],
  warn: (text: string) => void,
): void {
  if (charger.floatV === null) return;
  const cells = strings[0]?.reduce((sum, module) => sum + module.cells, 0) ?? 0;
  const floatCellV = charger.floatV / cells;
  const stocks = new Set<string>();
  for (const { stock, overVoltageReleaseV } of strings.flat()) {
    if (stocks.has(stock) || overVoltageReleaseV > floatCellV + FLOAT_MARGIN_V) continue;
    stocks.add(stock);
    warn(
      `stock ${stock}: the over-voltage release, ${volts(overVoltageReleaseV)} per cell, lies at or below float, ` +
        `${volts(floatCellV)} per cell, plus ${FLOAT_MARGIN_V * 1000} mV: a trip may last as long as the float`,
    );
  }
}

function warnOfAbsorption(
  { charger }: Candidate,
  strings: readonly (readonly NominalModule[])[],
  warn: (text: string) => void,
): void {
  const thresholds = strings.map((string) =>
    string.reduce((sum, { cells, overVoltageV }) => sum + cells * overVoltageV, 0),
  );
  const lowest = Math.min(...thresholds);
  if (charger.absorptionV > lowest) {
    warn(
      `absorption, ${volts(charger.absorptionV)}, lies above the sum of the over-voltage thresholds of a string, ` +
        `${volts(lowest)}: every charge ends in a trip`,
    );
  }
}

function peakWarnings(study: Study): readonly string[] {
  if (study.duty.kind !== 'profile') return [];
  return ['the profile has no peaks within its rows: short peaks are not tested'];
}

/** Bleeding decides more about drift than any tolerance, so the rule in force is always said. */
function bleedInForce(study: Study): readonly string[] {
  const rules = study.stocks.flatMap((stock) => {
    const settings = stock.kind === 'population' ? [stock.bms.bleed] : stock.modules.map(({ bms }) => bms.bleed);
    const words = [...new Set(settings.map(({ rule, when }) => (rule === 'none' ? rule : `${rule}, ${when}`)))];
    return words.map((word) => `bleed rule in force: ${word} (stock ${stock.key})`);
  });
  const overrides = study.candidates.flatMap(({ key, bleed }) =>
    bleed?.rule === undefined ? [] : [`bleed rule in force: ${bleed.rule} (candidate ${key})`],
  );
  return [...rules, ...overrides];
}

function volts(value: number): string {
  return `${Number(value.toFixed(3))} V`;
}
