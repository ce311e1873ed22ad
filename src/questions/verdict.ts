import { lineVerdict } from '../statistics/line-verdict.js';
import type { AcceptanceLine, Study } from '../study/study.js';
import { ONE_BMS_NOTE } from './absence.js';
import type { CandidateVerdict, LineAnswer, SummaryRow, Verdict } from './answers.js';

/**
 * Answers "is it good enough?": every acceptance line of the study put to every candidate.
 *
 * A candidate meets if all lines that apply to it do, and fails if one does; otherwise it is not decided. A line on what
 * the candidate's wiring does not have (drift between modules under one BMS) does not apply.
 *
 * @param summary rows of all candidates, with every statistic that a line names
 * @throws RangeError if a line's statistic is not among the rows
 */
export function judgeCandidates(study: Study, summary: readonly SummaryRow[]): readonly CandidateVerdict[] {
  return study.candidates.map(({ key }) => {
    const lines = study.acceptance.map((line) => judgeLine(line, key, summary));
    return { candidate: key, verdict: lines.length === 0 ? null : joined(lines), lines };
  });
}

function judgeLine(line: AcceptanceLine, candidate: string, summary: readonly SummaryRow[]): LineAnswer {
  const row = summary.find(
    (one) => one.candidate === candidate && one.measure === line.measure && one.statistic === line.statistic,
  );
  if (row === undefined) throw new RangeError(`${candidate} has no ${line.statistic} of ${line.measure}`);
  const verdict = row.note === ONE_BMS_NOTE ? 'not applicable' : lineVerdict(row, line.bound, line.limit);
  return { line, verdict, row };
}

function joined(lines: readonly LineAnswer[]): Verdict {
  const given = new Set(lines.map((line) => line.verdict));
  const decisive: readonly Verdict[] = ['fails', 'not decided', 'meets', 'not applicable'];
  return decisive.find((verdict) => given.has(verdict)) ?? 'not decided';
}
