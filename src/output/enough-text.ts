import type { Answers, Look, WatchedWidth } from '../questions/answers.js';
import { statisticWords, unitWords } from './measure-words.js';
import { numberText } from './number-text.js';
import { SCREEN_COLUMNS, wrapText } from './plain-text.js';
import { registered } from './shown-measures.js';

/** What a reader of a run that could end at several looks must know. */
export const LOOKS_CAVEAT =
  'Intervals of a run that ends because they are narrow hold what they say only for many banks. Measured at 95 %: shares ' +
  '95 to 97 %, means 95 %, 90 % where few banks carry them. Verdicts are on wider ones that hold at every look.';

const ENDS = {
  narrow: 'ended there: every watched interval was narrow enough',
  maximum: 'ended at the largest number; not every watched interval is narrow enough',
  unfinished: 'interrupted before an end',
} as const;

/**
 * The looks of a run and why it ended, with the widest of the watched intervals at the last look.
 *
 * @returns lines without line ends; none if the number of banks was fixed
 */
export function renderEnough({ enough }: Answers): readonly string[] {
  if (enough === null) return [];
  const { schedule, looks, end } = enough;
  const last = looks.at(-1);
  const taken = looks.length === 0 ? 'none yet' : looks.map(({ instances }) => instances).join(', ');
  const ended = end === 'maximum' && last?.enough ? ENDS.narrow : ENDS[end];
  return [
    ...wrapText(`Looks at ${schedule.join(', ')} banks; taken: ${taken}; ${ended}.`),
    ...(last === undefined ? [] : widest(last)).flatMap((one) =>
      wrapText(widthSentence(one), SCREEN_COLUMNS, { first: '  ', others: '    ' }),
    ),
    ...wrapText(LOOKS_CAVEAT),
  ];
}

/** Of every watched estimate the candidate whose interval is widest; one without an interval is wider than any. */
function widest({ watched }: Look): readonly WatchedWidth[] {
  const widestOf = new Map<string, WatchedWidth>();
  for (const one of watched) {
    const name = `${one.measure} ${one.statistic}`;
    const other = widestOf.get(name);
    if (other === undefined || widthOf(one) > widthOf(other)) widestOf.set(name, one);
  }
  return [...widestOf.values()];
}

function widthOf({ halfWidth, narrow }: WatchedWidth): number {
  if (halfWidth !== null) return halfWidth;
  return narrow ? Number.NEGATIVE_INFINITY : Number.POSITIVE_INFINITY;
}

function widthSentence({ candidate, measure: name, statistic, halfWidth, wanted }: WatchedWidth): string {
  const measure = registered(name);
  const what = [measure.title, statisticWords(measure, statistic)].filter((word) => word !== '').join(', ');
  const unit = unitWords(measure).replace('% of banks', 'points').replace(/^%/, 'points');
  const width = halfWidth === null ? 'no interval' : `+-${numberText(Number(halfWidth.toPrecision(3)))} ${unit}`;
  return `${what}: widest ${width} (${candidate}), wanted +-${numberText(wanted)} ${unit}`.trim();
}
