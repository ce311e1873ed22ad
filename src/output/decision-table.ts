import { windowCycles } from '../measures/measure.js';
import type { Answers, SummaryRow, SummaryStatistic } from '../questions/answers.js';
import type { Study } from '../study/study.js';
import { figureCell } from './figure-cell.js';
import { statisticWords, unitWords } from './measure-words.js';
import { type PeriodWords, periodWords, windowWords } from './period-words.js';
import { decimalsOf, screenNumber } from './screen-number.js';
import { type ShownMeasure, shownAmounts, shownEvents } from './shown-measures.js';
import { renderTextTable, type TextColumn, type TextRow } from './text-table.js';

/**
 * The table that a decision is made from: per candidate how often and how much, each with its interval below, and what
 * the acceptance lines say. The twins stand first: what the duty does to banks without spread.
 *
 * @returns lines without line ends
 */
export function renderDecisionTable(answers: Answers, study: Study): readonly string[] {
  const shown = [...shownEvents(answers), ...shownAmounts()];
  const rowOf = (candidate: string, { measure }: ShownMeasure, statistic: SummaryStatistic): SummaryRow => {
    const found = answers.summary.find(
      (row) => row.candidate === candidate && row.measure === measure.name && row.statistic === statistic,
    );
    if (found === undefined) throw new RangeError(`no ${statistic} of ${measure.name} for ${candidate}`);
    return found;
  };
  const keys = study.candidates.map((candidate) => candidate.key);
  const decimals = shown.map((one) => decimalsOf(keys.map((key) => rowOf(key, one, one.statistic))));
  const judged = study.acceptance.length > 0;
  const banks = keys.map((key) => ({
    name: key,
    cells: [
      ...shown.map((one, at) => {
        const style = one.measure.kind === 'event' ? 'share' : 'amount';
        return figureCell(rowOf(key, one, one.statistic), decimals[at], style);
      }),
      ...(judged ? [[answers.verdicts.find(({ candidate }) => candidate === key)?.verdict ?? '']] : []),
    ],
  }));
  const twins = keys.map((key) => ({
    name: key,
    cells: [
      ...shown.map((one, at) => [twinText(rowOf(key, one, 'twin'), one, decimals[at])]),
      ...(judged ? [['']] : []),
    ],
  }));
  const periods = periodWords(study);
  const columns = shown.map((one) => textColumn(one, study.cycles, periods));
  if (judged) columns.push({ head: ['acceptance'] });
  return renderTextTable('candidate', columns, [
    { title: 'twin: every value at its mean', rows: oncePerAll(twins) },
    { title: 'sampled banks', rows: banks },
  ]);
}

function textColumn({ measure, statistic }: ShownMeasure, cycles: number, periods: PeriodWords): TextColumn {
  const { from, to } = windowCycles(measure.window, cycles);
  // A rate names its period in the unit.
  const window = measure.unit.includes('/') ? '' : windowWords(from, to, cycles, periods);
  const phrases = [measure.title, window, statisticWords(measure, statistic), unitWords(measure)];
  return { head: phrases.filter((phrase) => phrase !== '') };
}

function twinText({ estimate }: SummaryRow, { measure }: ShownMeasure, decimals: number): string {
  if (estimate === null) return '-';
  if (measure.kind === 'event') return estimate > 0 ? 'yes' : 'no';
  return screenNumber(estimate, decimals);
}

/** Rows that all read the same become one. */
function oncePerAll(rows: readonly TextRow[]): readonly TextRow[] {
  const [first, ...others] = rows.map((row) => JSON.stringify(row.cells));
  const alike = others.length > 0 && others.every((other) => other === first);
  return alike ? [{ name: 'all candidates', cells: rows[0].cells }] : rows;
}
