import type { Answers, LineAnswer, Verdict } from '../questions/answers.js';
import type { AcceptanceLine, Study } from '../study/study.js';
import { statisticWords, unitWords } from './measure-words.js';
import { numberText } from './number-text.js';
import { SCREEN_COLUMNS, wrapText } from './plain-text.js';
import { registered } from './shown-measures.js';

const VERDICTS: readonly Verdict[] = ['meets', 'fails', 'not decided', 'not applicable'];

/** An acceptance line as a sentence: `lost capacity, 1 in 20 worse, at most 10 %`. */
export function acceptanceSentence({ measure: name, statistic, bound, limit }: AcceptanceLine): string {
  const measure = registered(name);
  const what = [measure.title, statisticWords(measure, statistic)].filter((word) => word !== '').join(', ');
  return `${what}, ${bound === 'at-most' ? 'at most' : 'at least'} ${numberText(limit)} ${unitWords(measure)}`.trim();
}

/**
 * The acceptance lines of a study and how each candidate stands to each.
 *
 * @returns lines without line ends; none if the study has no acceptance lines
 */
export function renderAcceptance(answers: Answers, study: Study): readonly string[] {
  if (study.acceptance.length === 0) return [];
  const { confidencePercent, verdictConfidencePercent, enough } = answers;
  const percent = (value: number): string => numberText(Number(value.toPrecision(6)));
  const oneSided = percent(50 + verdictConfidencePercent / 2);
  const shared = enough === null ? '' : `; ${enough.schedule.length} looks share ${percent(100 - confidencePercent)} %`;
  const rule = `decided where the whole ${percent(verdictConfidencePercent)} % interval is on one side (${oneSided} % one-sided${shared})`;
  return [
    ...wrapText(`Acceptance (your lines), ${rule}:`),
    ...study.acceptance.flatMap((line, index) =>
      wrapText(`${acceptanceSentence(line)}: ${standings(answers, index)}`, SCREEN_COLUMNS, {
        first: '  ',
        others: '    ',
      }),
    ),
  ];
}

function standings({ verdicts }: Answers, line: number): string {
  return VERDICTS.flatMap((verdict) => {
    const alike = verdicts.filter(({ lines }) => lines[line].verdict === verdict);
    const words = alike.map(({ candidate, lines }) => `${candidate}${undecided(lines[line])}`);
    return words.length === 0 ? [] : [`${verdict} ${words.join(', ')}`];
  }).join('; ');
}

/** What it would take to decide a line. */
function undecided({ verdict, line, row, wouldDecide, least }: LineAnswer): string {
  if (verdict !== 'not decided') return '';
  if (least !== null) return ` (needs at least ${least.blocks} blocks, ${least.banks} banks)`;
  const count =
    wouldDecide === null ? 'no number of banks would decide' : `about ${roundedUp(wouldDecide)} would decide`;
  if (row.method !== 'clopper-pearson' || line.bound !== 'at-most') return ` (${count})`;
  const events = Math.round(((row.estimate ?? 0) / 100) * row.instances);
  return ` (too rare to see, ${events} of ${row.instances}: ${count})`;
}

/** To two digits: the figure rests on an estimate itself. */
function roundedUp(count: number): number {
  const unit = 10 ** Math.max(0, Math.floor(Math.log10(count)) - 1);
  return Math.ceil(count / unit) * unit;
}
