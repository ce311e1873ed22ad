import type { SummaryRow } from '../questions/answers.js';
import { figureCell } from './figure-cell.js';
import { statisticWords, unitWords } from './measure-words.js';
import { SCREEN_COLUMNS, wrapText } from './plain-text.js';
import { decimalsOf } from './screen-number.js';
import { registered } from './shown-measures.js';

/**
 * Estimates of a run that goes on, a sentence per measure:
 * `load lost, % of banks, 64 banks so far: strings 7.8 (3.4 to 17.0), cross-linked 0.0 (0.0 to 5.6)`.
 *
 * @param rows measure by measure
 * @returns lines without line ends
 */
export function renderRunning(rows: readonly SummaryRow[], instances: number): readonly string[] {
  const isFirst = (row: SummaryRow, place: number) => rows.findIndex((other) => isSame(row, other)) === place;
  return rows.filter(isFirst).flatMap((first) => {
    const same = rows.filter((row) => isSame(row, first));
    const { statistic } = first;
    const measure = registered(first.measure);
    const what = [measure.title, statisticWords(measure, statistic), unitWords(measure)].filter((word) => word !== '');
    const decimals = decimalsOf(same);
    const figures = same.map((row) => {
      const [shown, interval] = figureCell(row, decimals, measure.kind === 'event' ? 'share' : 'amount');
      return `${row.candidate} ${shown} (${interval})`;
    });
    const said = same.some(({ estimate }) => estimate !== null) ? figures.join(', ') : 'too few';
    const sentence = `${what.join(', ')}, ${instances} banks so far: ${said}`;
    return wrapText(sentence, SCREEN_COLUMNS, { first: '  ', others: '    ' });
  });
}

function isSame(one: SummaryRow, other: SummaryRow): boolean {
  return one.measure === other.measure && one.statistic === other.statistic;
}
