import type { BankInput, CandidateInput } from './candidate.js';
import { defaultCharger, resolveCharger } from './charger.js';
import { defaultEqualiser, resolveEqualiser } from './equaliser.js';
import { type Layer, Layers } from './layers.js';
import { DEFAULT_LEAD_MOHM, stringLeads } from './leads.js';
import { defaultLoad, resolveLoad } from './load.js';
import type { Reading } from './reading.js';
import type { BleedOverride, Candidate, EqualiserSettings, Stock, StringLeads } from './study.js';
import { resolveUpkeep } from './upkeep.js';
import { moduleFacts, namedModules, type WiredModules, wireModules } from './wiring-rules.js';

const DEFAULT_LINK_MOHM = 1;

type Options = Layers<Partial<CandidateInput>>;

/** @returns the candidates that make a bank, in the order of the study; faults go to `reading` */
export function resolveCandidates(
  input: Readonly<Record<string, CandidateInput>>,
  bank: BankInput | undefined,
  stocks: readonly Stock[],
  reading: Reading,
): readonly Candidate[] {
  const known = moduleFacts(stocks);
  const named = namedModules(reading.written(['stock']));
  const candidates: Candidate[] = [];
  for (const [key, written] of Object.entries(input)) {
    const path = ['candidates', key];
    const wired = wireModules(path, written.wiring, written.modules, known, named, reading);
    if (written.link_mOhm !== undefined && written.wiring !== 'cross-linked') {
      reading.fault([...path, 'link_mOhm'], 'absent unless the wiring is cross-linked');
    }
    if (wired === undefined) continue;
    const layers: Layer<Partial<CandidateInput>>[] = [{ source: 'study', path, values: written }];
    if (bank !== undefined) layers.push({ source: 'bank', path: ['bank'], values: bank });
    layers.push({ source: 'default', path, values: defaultOptions(wired) });
    candidates.push(resolveCandidate(key, written, new Layers(path, layers), wired, reading));
  }
  return candidates;
}

function defaultOptions({ cellsInSeries, ratedAh }: WiredModules): Partial<CandidateInput> {
  return {
    string_lead_mOhm: DEFAULT_LEAD_MOHM,
    link_mOhm: DEFAULT_LINK_MOHM,
    charger: defaultCharger(cellsInSeries, ratedAh),
    load: defaultLoad(cellsInSeries),
    commissioning: 'as-received',
  };
}

function resolveCandidate(
  key: string,
  written: CandidateInput,
  options: Options,
  wired: WiredModules,
  reading: Reading,
): Candidate {
  const { wiring } = written;
  options.setting('wiring', reading);
  const oneBms = wiring === 'native' || written.modules.every((string) => string.length === 1);
  const upkeep = resolveUpkeep(options.pick('upkeep'), options.owner, oneBms, reading);
  const equaliser = equaliserOf(options, wired, oneBms, reading);
  return {
    key,
    title: written.title ?? key,
    wiring,
    strings: written.modules,
    leads: leadsOf(options, wired.strings.length, reading),
    linkOhm: wiring === 'cross-linked' ? options.si('link_mOhm', reading) : 0,
    charger: resolveCharger(options.inside('charger'), wired.cellsInSeries, reading),
    load: resolveLoad(options.inside('load'), reading),
    commissioning: options.setting('commissioning', reading),
    bleed: bleedOverride(options, reading),
    // Left out where there is none: candidates without it keep their simulation keys.
    ...(upkeep !== null && { upkeep }),
    ...(equaliser !== null && { equaliser }),
  };
}

/** The equaliser, null for none; one said for the whole bank leaves out candidates with one module to a string. */
function equaliserOf(
  options: Options,
  { cellsInSeries }: WiredModules,
  oneBms: boolean,
  reading: Reading,
): EqualiserSettings | null {
  const picked = options.pick('equaliser');
  if (picked === undefined || picked.value === null) return null;
  if (oneBms) {
    if (picked.source === 'study') reading.fault(picked.path, 'absent where a string has one BMS: no module beside it');
    return null;
  }
  const values = defaultEqualiser(cellsInSeries);
  return resolveEqualiser(
    options.inside('equaliser').over({ source: 'default', path: options.owner, values }),
    reading,
  );
}

function leadsOf(options: Options, strings: number, reading: Reading): readonly StringLeads[] {
  const leads = stringLeads(options.setting('string_lead_mOhm', reading), strings);
  if (leads !== undefined) return leads;
  const path = options.pick('string_lead_mOhm')?.path ?? options.owner;
  reading.fault(path, `a list of ${strings}, one per string`);
  return [];
}

/** Keys of the candidate and of the bank that stand over the bleed of every module. */
function bleedOverride(options: Options, reading: Reading): BleedOverride | null {
  const bleed = options.inside('bleed');
  if (bleed.layers.length === 0) return null;
  const si = (key: 'start_V' | 'stop_V' | 'current_mA' | 'delta_mV'): number | undefined =>
    bleed.pick(key) === undefined ? undefined : bleed.si(key, reading);
  const rule = bleed.pick('rule') && bleed.setting('rule', reading);
  const when = bleed.pick('when') && bleed.setting('when', reading);
  const startV = si('start_V');
  const stopV = si('stop_V');
  const currentA = si('current_mA');
  const deltaV = si('delta_mV');
  if (stopV !== undefined && !(startV !== undefined && stopV < startV)) {
    const path = bleed.pick('stop_V')?.path ?? bleed.owner;
    reading.fault(path, startV === undefined ? 'given together with start_V' : `a number below the start, ${startV} V`);
  }
  return {
    ...(rule !== undefined && { rule }),
    ...(when !== undefined && { when }),
    ...(startV !== undefined && { startV }),
    ...(startV !== undefined && stopV !== undefined && { stopBelowStartV: startV - stopV }),
    ...(currentA !== undefined && { currentA }),
    ...(deltaV !== undefined && { deltaV }),
  };
}
