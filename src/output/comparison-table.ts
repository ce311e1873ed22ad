import type { MeasureName } from '../measures/registry.js';
import type { Answers, ComparisonRow, ComparisonStatistic } from '../questions/answers.js';
import type { Study } from '../study/study.js';
import { figureCell } from './figure-cell.js';
import { decimalsOf } from './screen-number.js';
import { shownEvents } from './shown-measures.js';
import { renderTextTable, type TextColumn } from './text-table.js';

interface ComparisonColumn extends TextColumn {
  readonly measure: string;
  readonly statistic: ComparisonStatistic;
}

const CAPACITY: MeasureName = 'lost_capacity';
const CAPACITY_COLUMNS: readonly ComparisonColumn[] = [
  { head: ['mean lost capacity', 'points'], measure: CAPACITY, statistic: 'mean_difference' },
  { head: ['loses less capacity', '% of banks'], measure: CAPACITY, statistic: 'share_lower' },
];

/**
 * Each candidate against the reference on the same banks.
 *
 * @returns lines without line ends; none if there is no other candidate
 */
export function renderComparisonTable(answers: Answers, study: Study): readonly string[] {
  const keys = study.candidates.map((candidate) => candidate.key).filter((key) => key !== study.reference);
  if (keys.length === 0) return [];
  const columns: readonly ComparisonColumn[] = [
    ...shownEvents(answers).map(({ measure }) => ({
      head: [measure.title, 'points'],
      measure: measure.name,
      statistic: 'difference_of_shares' as const,
    })),
    ...CAPACITY_COLUMNS,
  ];
  const rowOf = (candidate: string, { measure, statistic }: ComparisonColumn): ComparisonRow => {
    const found = answers.comparisons.find(
      (row) => row.candidate === candidate && row.measure === measure && row.statistic === statistic,
    );
    if (found === undefined) throw new RangeError(`no ${statistic} of ${measure} for ${candidate}`);
    return found;
  };
  const decimals = columns.map((column) => decimalsOf(keys.map((key) => rowOf(key, column))));
  const rows = keys.map((key) => ({
    name: key,
    cells: columns.map((column, at) => {
      const style = column.statistic === 'share_lower' ? 'share' : 'difference';
      return figureCell(rowOf(key, column), decimals[at], style);
    }),
  }));
  return [
    `Against ${study.reference}, bank by bank (candidate less reference)`,
    ...renderTextTable('candidate', columns, [{ title: '', rows }]),
  ];
}
