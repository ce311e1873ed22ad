import { MEASURES } from '../measures/registry.js';
import { columnIndex, type OutcomeStore } from '../outcomes/outcome-store.js';
import { packKind } from '../study/packs.js';
import type { Candidate, Study } from '../study/study.js';
import type { Answers, ByCycleRow, ComparisonRow, HardestCase, SummaryRow } from './answers.js';
import { summariseCheckpoint } from './by-cycle.js';
import { adjustedForFamily, compareMeasure } from './comparison.js';
import { answerEnough } from './enough.js';
import { FIRST_EVENTS, summariseFirstEvent } from './first-event.js';
import { harderCase } from './hardest-case.js';
import { summariseMeasure } from './summary.js';
import { judgeCandidates } from './verdict.js';
import { verdictConfidence } from './verdict-confidence.js';

/**
 * Answers all questions of a study from the outcomes of its run. Holds no more than two columns at a time.
 *
 * @throws RangeError if the outcomes lack a candidate of the study or a column, or the reference is no candidate
 */
export async function answerStudy(study: Study, store: OutcomeStore): Promise<Answers> {
  const reference = study.candidates.find((candidate) => candidate.key === study.reference);
  if (reference === undefined) throw new RangeError(`reference ${study.reference} is no candidate`);
  const summary: SummaryRow[] = [];
  const byCycle: ByCycleRow[] = [];
  const comparisons: ComparisonRow[] = [];
  let hardestCase: HardestCase | null = null;
  for (const candidate of study.candidates) {
    summary.push(...(await summariseCandidate(study, candidate, store)));
    byCycle.push(...(await summariseCheckpoints(study, candidate, store)));
    if (candidate !== reference) comparisons.push(...(await compare(study, candidate, reference, store)));
    const lostCapacity = await store.column(candidate.key, 'lost_capacity');
    const loadLostCycles = await store.column(candidate.key, 'load_lost_days');
    hardestCase = harderCase(candidate.key, lostCapacity, loadLostCycles, hardestCase);
  }
  return {
    instances: store.instances,
    enough: await answerEnough(study, store),
    confidencePercent: percentOf(study.confidenceFraction),
    verdictConfidencePercent: percentOf(verdictConfidence(study)),
    summary,
    byCycle,
    comparisons: adjustedForFamily(comparisons),
    verdicts: await judgeCandidates(study, store),
    packs: study.candidates.flatMap((candidate) => {
      const kind = packKind(candidate, study.candidates);
      return kind === null ? [] : [{ candidate: candidate.key, kind }];
    }),
    hardestCase,
  };
}

/** 0.95 is no binary fraction: without rounding 99.9 % would be printed as 99.90000000000001. */
function percentOf(fraction: number): number {
  return Number((fraction * 100).toPrecision(12));
}

async function summariseCandidate(study: Study, candidate: Candidate, store: OutcomeStore): Promise<SummaryRow[]> {
  const columns = store.columns(candidate.key);
  const twin = await store.twin(candidate.key);
  const rows: SummaryRow[] = [];
  for (const measure of MEASURES) {
    const values = await store.column(candidate.key, measure.name);
    const ofTwin = twin.values[columnIndex(columns, measure.name)];
    rows.push(...summariseMeasure(study, candidate, measure, values, ofTwin));
  }
  return rows;
}

async function summariseCheckpoints(study: Study, candidate: Candidate, store: OutcomeStore): Promise<ByCycleRow[]> {
  const rows: ByCycleRow[] = [];
  for (const column of store.columns(candidate.key).filter(({ role }) => role === 'by-cycle')) {
    rows.push(...summariseCheckpoint(study, candidate, column, await store.column(candidate.key, column.name)));
  }
  for (const measure of FIRST_EVENTS) {
    rows.push(...summariseFirstEvent(study, candidate, measure, await store.column(candidate.key, measure)));
  }
  return rows;
}

async function compare(
  study: Study,
  candidate: Candidate,
  reference: Candidate,
  store: OutcomeStore,
): Promise<ComparisonRow[]> {
  const rows: ComparisonRow[] = [];
  for (const measure of MEASURES) {
    const values = await store.column(candidate.key, measure.name);
    const referenceValues = await store.column(reference.key, measure.name);
    rows.push(...compareMeasure(study, { candidate, reference }, measure, values, referenceValues));
  }
  return rows;
}
