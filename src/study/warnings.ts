import { warnOfChargerBeyondBms, warnOfColdCharge, warnOfDisconnect } from './bank-limit-warnings.js';
import { nominalModules } from './bank-module.js';
import { warnOfAbsorption, warnOfFloat } from './charger-warnings.js';
import { dutyWarnings, warnOfFirstDemand } from './duty-warnings.js';
import { measuredWarnings } from './measured-warnings.js';
import { warnOfPacks } from './pack-warnings.js';
import { countWarnings } from './rating-warnings.js';
import type { Study } from './study.js';
import { unlikeVoltages, warnOfSeriesCount, warnOfUnits } from './wiring-warnings.js';

/** @returns what an author should know of a study that runs all the same, one sentence each, with what to do about it */
export function studyWarnings(study: Study): readonly string[] {
  const warnings = new Map<string, string[]>();
  for (const candidate of study.candidates) {
    const warn = (text: string): void => {
      const keys = warnings.get(text) ?? [];
      if (!keys.includes(candidate.key)) warnings.set(text, [...keys, candidate.key]);
    };
    const strings = nominalModules(study, candidate);
    warnOfFloat(candidate, strings, warn);
    warnOfAbsorption(candidate, strings, warn);
    warnOfChargerBeyondBms(study, candidate, strings, warn);
    warnOfDisconnect(candidate, strings, warn);
    warnOfColdCharge(study.duty, candidate, strings, warn);
    warnOfSeriesCount(strings, warn);
    warnOfUnits(strings, warn);
    warnOfFirstDemand(study.duty, candidate, strings, warn);
    warnOfPacks(study, candidate, warn);
    for (const text of countWarnings(study, candidate)) warn(text);
  }
  const ofCandidates = [...warnings].map(([text, keys]) => `${text} (${keys.join(', ')})`);
  return [...ofCandidates, ...unlikeVoltages(study), ...dutyWarnings(study), ...measuredWarnings(study)];
}
