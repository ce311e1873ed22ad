import type { Answers, Verdict } from '../questions/answers.js';
import type { AcceptanceLine, Study } from '../study/study.js';
import { statisticWords, unitWords } from './measure-words.js';
import { numberText } from './number-text.js';
import { SCREEN_COLUMNS, wrapText } from './plain-text.js';
import { registered } from './shown-measures.js';

const VERDICTS: readonly Verdict[] = ['meets', 'fails', 'not decided', 'not applicable'];

/** An acceptance line as a sentence: `lost capacity, 1 in 20 worse, at most 10 %`. */
function acceptanceSentence({ measure: name, statistic, bound, limit }: AcceptanceLine): string {
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
  const { confidencePercent } = answers;
  const oneSided = numberText(50 + confidencePercent / 2);
  const rule = `decided where the whole ${numberText(confidencePercent)} % interval is on one side (${oneSided} % one-sided)`;
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
    const keys = verdicts.filter(({ lines }) => lines[line].verdict === verdict).map(({ candidate }) => candidate);
    return keys.length === 0 ? [] : [`${verdict} ${keys.join(', ')}`];
  }).join('; ');
}
