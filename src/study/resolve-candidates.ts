import type { BankInput, CandidateInput } from './candidate.js';
import { defaultCharger, resolveCharger } from './charger.js';
import { conductorOhm } from './conductor.js';
import { defaultEqualiser, resolveEqualiser } from './equaliser.js';
import { firstKeyOf } from './first-key.js';
import { type Layer, Layers } from './layers.js';
import { leadsOfConductors } from './lead-conductors.js';
import { DEFAULT_LEAD_MOHM, stringLeads } from './leads.js';
import { defaultLoad, resolveLoad } from './load.js';
import { resolveBankRatings } from './ratings.js';
import type { Reading } from './reading.js';
import { resolveNetwork } from './resolve-network.js';
import { slotOffsets } from './slot-offset.js';
import type { BleedOverride, Candidate, CustomNetwork, EqualiserSettings, Stock, StringLeads } from './study.js';
import { renderPath, type StudyPath } from './study-path.js';
import { DEFAULT_BUS_SEGMENT_MOHM, resolveTakeOff } from './take-off.js';
import { inUnitOfKey } from './units.js';
import { resolveUpkeep } from './upkeep.js';
import { moduleFacts, namedModules, type WiredModules, wireModules } from './wiring-rules.js';

const DEFAULT_LINK_MOHM = 1;
const LEAST_LINK_OHM = 1e-6;

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
    checkKeysOfWiring(path, written, reading);
    if (wired === undefined) continue;
    const network = customNetwork(path, written, reading);
    if (network === undefined) continue;
    const layers: Layer<Partial<CandidateInput>>[] = [{ source: 'study', path, values: written }];
    if (bank !== undefined) layers.push({ source: 'bank', path: ['bank'], values: bank });
    layers.push({ source: 'default', path, values: defaultOptions(wired) });
    candidates.push(resolveCandidate(key, written, new Layers(path, layers), wired, network, reading));
  }
  return candidates;
}

function defaultOptions({ cellsInSeries, ratedAh }: WiredModules): Partial<CandidateInput> {
  return {
    string_lead_mOhm: DEFAULT_LEAD_MOHM,
    link_mOhm: DEFAULT_LINK_MOHM,
    take_off: 'equal-leads',
    bus_segment_mOhm: DEFAULT_BUS_SEGMENT_MOHM,
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
  network: CustomNetwork | null,
  reading: Reading,
): Candidate {
  const { wiring } = written;
  options.setting('wiring', reading);
  const slotOffsetK = slotOffsetsOf(options, written.modules, reading);
  const isCustom = wiring === 'custom';
  const oneBms = wiring === 'native' || written.modules.every((string) => string.length === 1);
  const upkeep = resolveUpkeep(options.pick('upkeep'), options.owner, oneBms, reading);
  const equaliser = equaliserOf(options, wired, oneBms, isCustom, reading);
  return {
    key,
    title: written.title ?? key,
    wiring,
    strings: written.modules,
    leads: isCustom ? [] : leadsOf(options, wired.strings.length, reading),
    linkOhm: wiring === 'cross-linked' ? linkOf(options, reading) : 0,
    charger: resolveCharger(options.inside('charger'), wired.cellsInSeries, reading),
    load: resolveLoad(options.inside('load'), reading),
    commissioning: options.setting('commissioning', reading),
    bleed: bleedOverride(options, reading),
    ...(slotOffsetK !== undefined && { slotOffsetK }),
    ...(network !== null && { network }),
    ...takeOffOf(options, isCustom, wired.strings.length, reading),
    ...ratingsOf(options, reading),
    // Left out where there is none: candidates without it keep their simulation keys.
    ...(upkeep !== null && { upkeep }),
    ...(equaliser !== null && { equaliser }),
  };
}

/** Keys that stand for nothing in the wiring of a candidate that writes them itself. */
function checkKeysOfWiring(path: StudyPath, written: CandidateInput, reading: Reading): void {
  const { wiring } = written;
  for (const key of ['link_mOhm', 'link'] as const) {
    if (written[key] !== undefined && wiring !== 'cross-linked') {
      reading.fault([...path, key], 'absent unless the wiring is cross-linked');
    }
  }
  if (wiring !== 'custom') {
    if (written.network !== undefined) reading.fault([...path, 'network'], 'absent unless the wiring is custom');
    return;
  }
  for (const key of ['string_lead_mOhm', 'string_lead', 'take_off', 'bus_segment_mOhm', 'bus_segment'] as const) {
    if (written[key] !== undefined) {
      reading.fault([...path, key], 'absent with a custom wiring, which has all its conductors in network');
    }
  }
}

/** @returns null for the named wirings, undefined after a fault */
function customNetwork(path: StudyPath, written: CandidateInput, reading: Reading): CustomNetwork | null | undefined {
  if (written.wiring !== 'custom') return null;
  if (written.network === undefined) {
    reading.fault([...path, 'network'], 'a mapping with nodes, bus_minus, bus_plus and branches');
    return undefined;
  }
  const network = resolveNetwork(path, written.network, written.modules, reading);
  if (network !== undefined) {
    const modules = network.branches.filter(({ kind }) => kind === 'module').length;
    const value = `nodes ${network.nodes}, modules ${modules}, conductors ${network.branches.length - modules}`;
    reading.origins.push({ path: renderPath([...path, 'network']), value, unit: '', source: 'study' });
  }
  return network;
}

function takeOffOf(
  options: Options,
  isCustom: boolean,
  strings: number,
  reading: Reading,
): Pick<Candidate, 'takeOff'> | undefined {
  const takeOff = isCustom ? null : resolveTakeOff(options, strings, reading);
  return takeOff === null ? undefined : { takeOff };
}

function ratingsOf(options: Options, reading: Reading): Pick<Candidate, 'ratings'> | undefined {
  const ratings = resolveBankRatings(options.inside('ratings'), reading);
  return ratings && { ratings };
}

function linkOf(options: Options, reading: Reading): number {
  if (firstKeyOf(options, 'link_mOhm', 'link') === 'link_mOhm') return options.si('link_mOhm', reading);
  const ohm = conductorOhm(options.setting('link', reading));
  const { path, source } = options.pick('link') ?? { path: options.owner, source: 'study' };
  if (!(ohm >= LEAST_LINK_OHM)) reading.faultWith(path, 'must be a conductor of at least 0.001 mOhm, got less');
  reading.origins.push({
    path: renderPath([...options.owner, 'link_mOhm']),
    value: milliohms(ohm),
    unit: 'mOhm',
    source,
  });
  return ohm;
}

function milliohms(ohm: number): string {
  return String(Number(inUnitOfKey('mOhm', ohm).toPrecision(6)));
}

/** The equaliser, null for none; one said for the whole bank leaves out candidates with one module to a string. */
function equaliserOf(
  options: Options,
  { cellsInSeries }: WiredModules,
  oneBms: boolean,
  isCustom: boolean,
  reading: Reading,
): EqualiserSettings | null {
  const picked = options.pick('equaliser');
  if (picked === undefined || picked.value === null) return null;
  if (isCustom) {
    reading.fault(picked.path, 'absent with a custom wiring, whose strings need not have the posts of a device');
    return null;
  }
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
  const key = firstKeyOf(options, 'string_lead_mOhm', 'string_lead');
  const leads =
    key === 'string_lead'
      ? leadsOfConductors(options.setting('string_lead', reading), strings)
      : stringLeads(options.setting('string_lead_mOhm', reading), strings);
  const { path, source } = options.pick(key) ?? { path: options.owner, source: 'default' };
  if (leads !== undefined) {
    if (key === 'string_lead') {
      const parts = leads.map(({ negativeOhm, betweenOhm, positiveOhm }) =>
        [negativeOhm, betweenOhm, positiveOhm].map(milliohms).join(' / '),
      );
      const value = `negative / between / positive ${[...new Set(parts)].join(', ')}`;
      reading.origins.push({ path: renderPath([...options.owner, 'string_lead_mOhm']), value, unit: 'mOhm', source });
    }
    return leads;
  }
  reading.fault(path, `a list of ${strings}, one per string`);
  return [];
}

/** Absent unless the candidate or the bank says so: then nothing changes for banks of one temperature. */
function slotOffsetsOf(
  options: Options,
  strings: CandidateInput['modules'],
  reading: Reading,
): Candidate['slotOffsetK'] {
  const picked = options.pick('slot_temperature_offset_K');
  if (picked === undefined) return undefined;
  options.setting('slot_temperature_offset_K', reading);
  const positions = strings[0]?.length ?? 0;
  const offsets = slotOffsets(picked.value, strings.length, positions);
  if (offsets === undefined) {
    reading.fault(picked.path, `a list of ${positions}, one per position, or ${strings.length} such lists`);
  }
  return offsets;
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
