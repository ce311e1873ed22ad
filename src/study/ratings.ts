import type { z } from 'zod';
import { amount, count } from './amount.js';
import type { Layers } from './layers.js';
import type { Reading } from './reading.js';
import { section } from './section.js';
import type { BankRatings, Candidate, ModuleRatings, Study } from './study.js';

const current = { above: 0, atMost: 100_000 };

/** The section `ratings` of a stock or of a module written down. */
export const MODULE_RATINGS = section({
  continuous_A: amount(current, { description: 'Current that a module may carry for ever.' }).optional(),
  peak_A: amount(current, { description: 'Greatest current that a module may carry at all.' }).optional(),
  blocking_V: amount(
    { above: 0, atMost: 10_000 },
    { description: 'Voltage that the open BMS of a module can block.' },
  ).optional(),
  most_in_series: count({ atLeast: 1, atMost: 100 }, { description: 'Modules in series.' }).optional(),
  most_in_parallel: count({ atLeast: 1, atMost: 100 }, { description: 'Strings in parallel.' }).optional(),
}).meta({ description: 'What the maker allows: compared with what happens; nothing is made to obey it.' });

/** The section `ratings` of the bank or of a candidate. */
export const BANK_RATINGS = section({
  lead_A: amount(current, { description: 'Ampacity of the leads of a string.' }).optional(),
  link_A: amount(current, { description: 'Ampacity of a link.' }).optional(),
  string_fuse_A: amount(current, { description: 'Rated current of the fuse of a string.' }).optional(),
  fuse_breaking_A: amount(
    { above: 0, atMost: 1_000_000 },
    { description: 'Current that the fuse of a string can break (its breaking capacity).' },
  ).optional(),
}).meta({ description: 'What conductors and fuses are made for: compared with what happens.' });

export type ModuleRatingsInput = z.infer<typeof MODULE_RATINGS>;
export type BankRatingsInput = z.infer<typeof BANK_RATINGS>;

/** @returns undefined if no layer states any, so that a study without ratings stays as it is */
export function resolveModuleRatings(layers: Layers<ModuleRatingsInput>, reading: Reading): ModuleRatings | undefined {
  if (layers.layers.length === 0) return undefined;
  const stated = (key: keyof ModuleRatingsInput): number | null =>
    layers.pick(key) === undefined ? null : layers.si(key, reading);
  return {
    continuousA: stated('continuous_A'),
    peakA: stated('peak_A'),
    blockingV: stated('blocking_V'),
    mostInSeries: stated('most_in_series'),
    mostInParallel: stated('most_in_parallel'),
  };
}

/** @returns undefined if no layer states any */
export function resolveBankRatings(layers: Layers<BankRatingsInput>, reading: Reading): BankRatings | undefined {
  if (layers.layers.length === 0) return undefined;
  const stated = (key: keyof BankRatingsInput): number | null =>
    layers.pick(key) === undefined ? null : layers.si(key, reading);
  return {
    leadA: stated('lead_A'),
    linkA: stated('link_A'),
    fuseA: stated('string_fuse_A'),
    fuseBreakingA: stated('fuse_breaking_A'),
  };
}

/** @returns the ratings of each module of a candidate, string by string; null where its stock states none */
export function ratingsOfModules(study: Study, candidate: Candidate): readonly (readonly (ModuleRatings | null)[])[] {
  const byId = new Map<string, ModuleRatings | undefined>();
  for (const stock of study.stocks) {
    if (stock.kind === 'population') for (const id of stock.moduleIds) byId.set(id, stock.ratings);
    else for (const { id, ratings } of stock.modules) byId.set(id, ratings);
  }
  return candidate.strings.map((ids) => ids.map((id) => byId.get(id) ?? null));
}
