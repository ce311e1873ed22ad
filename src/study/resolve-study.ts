import { resolveAcceptance } from './acceptance.js';
import { resolveEnough } from './enough.js';
import { didYouMean } from './nearest-name.js';
import { resolveOcv } from './ocv.js';
import type { Origin } from './origin.js';
import { titledPacks } from './packs.js';
import type { ReadStudyOptions } from './read-options.js';
import type { Reading } from './reading.js';
import { checkReleaseGaps } from './release-gap.js';
import { resolveCandidates } from './resolve-candidates.js';
import { resolveDuty } from './resolve-duty.js';
import { resolveStocks } from './resolve-stocks.js';
import { bindsBlocks, type SamplingPlan } from './sampling-plan.js';
import { sobolColumns } from './sobol-columns.js';
import type { Candidate, Study } from './study.js';
import { DEFAULT_TOP, FORMAT, type StudyInput } from './study-file.js';
import { unitOfKey } from './units.js';
import { studyWarnings } from './warnings.js';

type TopKey = keyof typeof DEFAULT_TOP;

/** @returns the resolved study, or undefined after recording in `reading` what keeps it from being one */
export function resolveStudy(input: StudyInput, options: ReadStudyOptions, reading: Reading): Study | undefined {
  const top = resolveTop(input, options, reading);
  const ocv = resolveOcv(input.ocv, reading);
  const stocks = resolveStocks(input.stock ?? {}, ocv, reading);
  const duty = input.duty && resolveDuty(input.duty, reading);
  const candidates = titledPacks(resolveCandidates(input.candidates ?? {}, input.bank, stocks, reading), reading);
  const reference = resolveReference(input, candidates, reading);
  const acceptance = resolveAcceptance(input.acceptance ?? [], options.measures, reading);
  const isOverridden = options.overrides?.instances !== undefined;
  const enough = input.enough && resolveEnough(input.enough, top, isOverridden, options.measures, reading);
  if (duty === undefined) return undefined;
  const study: Study = {
    format: FORMAT,
    ...top,
    ...(top.plan === 'sobol' && { sobolColumns: sobolColumns(duty, stocks) }),
    ocvTables: ocv.tables,
    stocks,
    duty,
    candidates,
    reference,
    acceptance,
    ...(enough !== undefined && { enough }),
  };
  checkReleaseGaps(study, reading);
  reading.warnings.push(...studyWarnings(study));
  return study;
}

type Top = Pick<
  Study,
  'title' | 'seed' | 'instances' | 'blockSize' | 'plan' | 'cycles' | 'confidenceFraction' | 'driftLimitFraction'
>;

function resolveTop(input: StudyInput, { fileName, overrides }: ReadStudyOptions, reading: Reading): Top {
  const note = (path: string, value: string | number, source: Origin['source']): void => {
    reading.origins.push({ path, value: String(value), unit: unitOfKey(path), source });
  };
  const number = (key: Exclude<TopKey, 'seed' | 'plan'>): number => {
    const value = input[key] ?? DEFAULT_TOP[key];
    note(key, value, input[key] === undefined ? 'default' : 'study');
    return value;
  };
  const title = input.title ?? fileName;
  note('title', title, input.title === undefined ? 'default' : 'study');
  const seed = overrides?.seed ?? String(input.seed ?? DEFAULT_TOP.seed);
  const ownSeed = input.seed === undefined ? 'default' : 'study';
  note('seed', seed, overrides?.seed === undefined ? ownSeed : 'command line');
  if (overrides?.instances !== undefined) note('instances', overrides.instances, 'command line');
  const asked = overrides?.instances ?? number('instances');
  const blockSize = number('block');
  const plan = input.plan ?? DEFAULT_TOP.plan;
  note('plan', plan, input.plan === undefined ? 'default' : 'study');
  return {
    title,
    seed,
    instances: bindsBlocks(plan) ? inWholeBlocks(asked, blockSize, plan, reading) : asked,
    blockSize,
    plan,
    cycles: number('cycles'),
    confidenceFraction: number('confidence_percent') / 100,
    driftLimitFraction: number('drift_limit_percent') / 100,
  };
}

/** A block of a plan that binds its instances is never short. */
function inWholeBlocks(instances: number, blockSize: number, plan: SamplingPlan, reading: Reading): number {
  const whole = Math.ceil(instances / blockSize) * blockSize;
  if (whole !== instances) {
    reading.warnings.push(
      `instances: ${instances} is rounded up to ${whole}, whole blocks of ${blockSize}, as the plan ${plan} needs`,
    );
  }
  return whole;
}

function resolveReference(input: StudyInput, candidates: readonly Candidate[], reading: Reading): string {
  const names = Object.keys(input.candidates ?? {});
  const reference = input.reference ?? names[0] ?? candidates[0]?.key ?? '';
  if (input.reference !== undefined && !names.includes(reference)) {
    if (!reading.isIncomplete(['candidates', reference])) {
      const hint = didYouMean(reference, names) || ` (candidates: ${names.join(', ')})`;
      reading.fault(['reference'], 'the name of a candidate', hint);
    }
    return reference;
  }
  const source = input.reference === undefined ? 'default' : 'study';
  reading.origins.push({ path: 'reference', value: reference, unit: '', source });
  return reference;
}
