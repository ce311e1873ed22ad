import { ambientOf, ambientOrigin } from './ambient.js';
import { DEFAULT_CYCLE_H, type DutyInput, type PhaseInput } from './duty.js';
import { Layers } from './layers.js';
import { readProfile } from './profile.js';
import type { Reading } from './reading.js';
import { resolveSpread } from './resolve-spread.js';
import type { BankSpread, Duty, DutyPart, DutySegment } from './study.js';
import type { StudyPath } from './study-path.js';
import { secondsFromHours } from './units.js';

interface WrittenPart {
  readonly name: string;
  readonly repeat: number;
  readonly profile?: string | undefined;
  readonly phases?: readonly PhaseInput[] | undefined;
  /** Where a row or phase does not say otherwise; absent = 25. */
  readonly ambientDegC?: number | undefined;
  readonly path: StudyPath;
}

/** @returns the duty, or undefined after a fault that leaves nothing to go on with */
export function resolveDuty(input: DutyInput, reading: Reading): Duty | undefined {
  const written = writtenParts(input);
  const kind = written.some(({ profile }) => profile !== undefined) ? 'profile' : 'phases';
  if (written.some(({ profile }) => (profile !== undefined) !== (kind === 'profile'))) {
    reading.fault(['duty', 'parts'], 'parts that are all profiles or all phases');
    return undefined;
  }
  if (kind === 'phases' && input.cycle_h !== undefined) {
    reading.fault(['duty', 'cycle_h'], 'absent beside phases, whose cycle is one pass of them');
  }
  const layers = new Layers<DutyInput>(
    ['duty'],
    [
      { source: 'study', path: ['duty'], values: input },
      { source: 'default', path: ['duty'], values: { cycle_h: DEFAULT_CYCLE_H, load_factor: 1, charge_factor: 1 } },
    ],
  );
  const cycleH = kind === 'profile' ? layers.setting('cycle_h', reading) : DEFAULT_CYCLE_H;
  const parts: DutyPart[] = [];
  for (const part of written) {
    const cycles = cyclesOf(part, cycleH, reading);
    if (cycles === undefined) continue;
    parts.push({ name: part.name, repeat: part.repeat, cycles });
    reading.origins.push({
      path: input.parts === undefined ? 'duty' : `duty.parts.${part.name}`,
      value: `${part.profile ?? 'phases'}, ${cycles.length} x ${cycles[0]?.length ?? 0} segments, ${part.repeat} times`,
      unit: '',
      source: 'study',
    });
    reading.origins.push(ambientOrigin(input.parts === undefined ? 'duty' : `duty.parts.${part.name}`, cycles.flat()));
  }
  const loadFactor = bankSpreadOf(layers, 'load_factor', reading);
  const chargeFactor = bankSpreadOf(layers, 'charge_factor', reading);
  if (parts.length !== written.length) return undefined;
  const cycleS = kind === 'profile' ? secondsFromHours(cycleH) : longestPassS(parts);
  return { kind, cycleS, parts, loadFactor, chargeFactor };
}

function writtenParts(input: DutyInput): readonly WrittenPart[] {
  const ambientDegC = input.ambient_degC;
  if (input.parts === undefined) {
    return [{ name: 'duty', repeat: 1, profile: input.profile, phases: input.phases, ambientDegC, path: ['duty'] }];
  }
  return input.parts.map(({ name, repeat, profile, phases, ambient_degC }, index) => ({
    name,
    repeat: repeat ?? 1,
    profile,
    phases,
    ambientDegC: ambient_degC ?? ambientDegC,
    path: ['duty', 'parts', index],
  }));
}

function cyclesOf(part: WrittenPart, cycleH: number, reading: Reading): DutyPart['cycles'] | undefined {
  if (part.profile === undefined) {
    checkPeaks(part, reading);
    return [(part.phases ?? []).flatMap((phase) => segmentsOf(phase, part.ambientDegC))];
  }
  const text = reading.textOf([...part.path, 'profile'], part.profile);
  if (text === undefined) return undefined;
  const read = readProfile(text, part.profile, cycleH, part.ambientDegC);
  if ('cycles' in read) return read.cycles;
  // Two parts may name one file; its faults are told once.
  if (!reading.problems.some(({ file }) => file === part.profile)) reading.problems.push(...read.problems);
  return undefined;
}

/** A peak is no trough and lies within its phase. */
function checkPeaks({ path, phases }: WrittenPart, reading: Reading): void {
  for (const [index, phase] of (phases ?? []).entries()) {
    if (!('discharge_W' in phase) || phase.load_peak_W === undefined || phase.peak_s === undefined) continue;
    const at = [...path, 'phases', index];
    const { discharge_W, load_peak_W, peak_s, for_h } = phase;
    if (load_peak_W < discharge_W) reading.fault([...at, 'load_peak_W'], `at least discharge_W, ${discharge_W}`);
    const lengthS = secondsFromHours(for_h);
    if (peak_s > lengthS) reading.fault([...at, 'peak_s'], `at most ${lengthS}, the length of its phase`);
  }
}

/** The phase, and after it its peak. */
function segmentsOf(phase: PhaseInput, ambientDegC: number | undefined): DutySegment[] {
  const whole = segmentOf(phase, ambientDegC);
  if (!('discharge_W' in phase) || phase.load_peak_W === undefined || phase.peak_s === undefined) return [whole];
  const peak = { ...whole, durationS: phase.peak_s, loadW: phase.load_peak_W };
  const beforeS = whole.durationS - phase.peak_s;
  return beforeS > 0 ? [{ ...whole, durationS: beforeS }, peak] : [peak];
}

function segmentOf(phase: PhaseInput, ambientDegC: number | undefined): DutySegment {
  const idle = {
    loadW: 0,
    loadA: 0,
    chargeW: 0,
    endsWhenCharged: false,
    ...ambientOf(phase.ambient_degC ?? ambientDegC),
  };
  if ('discharge_W' in phase) return { ...idle, durationS: secondsFromHours(phase.for_h), loadW: phase.discharge_W };
  if ('discharge_A' in phase) return { ...idle, durationS: secondsFromHours(phase.for_h), loadA: phase.discharge_A };
  if ('rest_h' in phase) return { ...idle, durationS: secondsFromHours(phase.rest_h) };
  const chargeW = phase.charge_W ?? null;
  if ('charge' in phase) {
    return { ...idle, durationS: secondsFromHours(phase.at_most_h), chargeW, endsWhenCharged: true };
  }
  return { ...idle, durationS: secondsFromHours(phase.charge_for_h), chargeW };
}

function longestPassS(parts: readonly DutyPart[]): number {
  const passes = parts.flatMap(({ cycles }) =>
    cycles.map((segments) => segments.reduce((sum, { durationS }) => sum + durationS, 0)),
  );
  return Math.max(...passes);
}

function bankSpreadOf(layers: Layers<DutyInput>, key: 'load_factor' | 'charge_factor', reading: Reading): BankSpread {
  const spread = resolveSpread(layers, key, reading);
  if (spread === undefined) throw new RangeError(`no default for duty.${key}`);
  if (!(spread.lower >= 0)) {
    reading.faultWith(
      ['duty', key],
      `must be spread so that every value is 0 or more (unbounded laws cut at 5 sd), got ${spread.lower.toPrecision(5)}`,
    );
  }
  return { nominal: spread.nominal, relative: spread.relative, bank: spread.laws.bank };
}
