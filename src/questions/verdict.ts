import { measureNamed } from '../measures/registry.js';
import type { OutcomeStore } from '../outcomes/outcome-store.js';
import { lineVerdict } from '../statistics/line-verdict.js';
import type { AcceptanceLine, Candidate, Study } from '../study/study.js';
import { ONE_BMS_NOTE } from './absence.js';
import type { CandidateVerdict, LineAnswer, SummaryRow, Verdict } from './answers.js';
import { decidingCount } from './deciding-count.js';
import { leastBlocks } from './least-blocks.js';
import { summariseMeasure } from './summary.js';
import { verdictConfidence } from './verdict-confidence.js';

/**
 * Answers "is it good enough?": every acceptance line of the study put to every candidate.
 *
 * Intervals are those of the summary where the number of banks was fixed, wider ones where the run could have ended at
 * one of several looks.
 *
 * @throws RangeError if a line names no measure or a statistic that the measure does not have
 */
export async function judgeCandidates(study: Study, store: OutcomeStore): Promise<readonly CandidateVerdict[]> {
  const verdicts: CandidateVerdict[] = [];
  for (const candidate of study.candidates) {
    const lines: LineAnswer[] = [];
    for (const line of study.acceptance) lines.push(await answerLine(study, candidate, line, store));
    verdicts.push({ candidate: candidate.key, verdict: joinedVerdict(lines.map(({ verdict }) => verdict)), lines });
  }
  return verdicts;
}

async function answerLine(
  study: Study,
  candidate: Candidate,
  line: AcceptanceLine,
  store: OutcomeStore,
): Promise<LineAnswer> {
  const measure = measureNamed(line.measure);
  if (measure === undefined) throw new RangeError(`no measure ${line.measure}`);
  const confidenceFraction = verdictConfidence(study);
  const values = await store.column(candidate.key, measure.name);
  const rows = summariseMeasure({ ...study, confidenceFraction }, candidate, measure, values, null);
  const row = rows.find(({ statistic }) => statistic === line.statistic);
  if (row === undefined) throw new RangeError(`${candidate.key} has no ${line.statistic} of ${line.measure}`);
  const verdict = judgeLine(line, row);
  if (verdict !== 'not decided') return { line, verdict, row, wouldDecide: null, least: null };
  const wouldDecide = decidingCount(line, row, values, confidenceFraction);
  return { line, verdict, row, wouldDecide, least: leastBlocks(study, line, values) };
}

/** A line on what the candidate's wiring does not have (drift between modules under one BMS) does not apply. */
export function judgeLine(line: AcceptanceLine, row: SummaryRow): Verdict {
  return row.note === ONE_BMS_NOTE ? 'not applicable' : lineVerdict(row, line.bound, line.limit);
}

/**
 * A candidate meets if all lines that apply to it do, and fails if one does; otherwise it is not decided.
 *
 * @returns null without lines
 */
export function joinedVerdict(ofLines: readonly Verdict[]): Verdict | null {
  const decisive: readonly Verdict[] = ['fails', 'not decided', 'meets', 'not applicable'];
  return decisive.find((verdict) => ofLines.includes(verdict)) ?? null;
}
