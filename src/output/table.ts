import type { Answers } from '../questions/answers.js';
import type { Study } from '../study/study.js';
import { renderAcceptance } from './acceptance-text.js';
import { CAUTIONS } from './caution.js';
import { renderComparisonTable } from './comparison-table.js';
import { renderDecisionTable } from './decision-table.js';
import { renderEnough } from './enough-text.js';
import { renderHardestCase } from './hardest-case-text.js';
import { numberText } from './number-text.js';
import { renderPackNotes } from './pack-notes.js';
import { periodWords } from './period-words.js';
import { asciiText, wrapText } from './plain-text.js';

/**
 * What a run prints: the study, the decision table, the comparison, the looks, the acceptance lines, the hardest case and the
 * cautions. Printable ASCII, at most 100 columns except for a command with a long path.
 *
 * @param folder of the run, as a user types it
 * @returns text with `\n` after every line
 */
export function renderTable(answers: Answers, study: Study, folder: string): string {
  const blocks = [
    renderHead(answers, study),
    [...renderDecisionTable(answers, study), ...renderPackNotes(answers)],
    renderComparisonTable(answers, study),
    renderEnough(answers),
    renderAcceptance(answers, study),
    renderHardestCase(answers, study, folder),
    wrapText(`Caution: ${CAUTIONS.join(' ')}`),
  ];
  const lines = blocks.filter((block) => block.length > 0).flatMap((block) => [...block, '']);
  return lines
    .slice(0, -1)
    .map((line) => `${line}\n`)
    .join('');
}

function renderHead({ instances, enough, confidencePercent }: Answers, study: Study): readonly string[] {
  const banks =
    instances === study.instances || enough?.end === 'narrow'
      ? `${instances} sampled ${instances === 1 ? 'bank' : 'banks'}`
      : `${instances} of ${study.instances} sampled banks (unfinished)`;
  const { one, many } = periodWords(study);
  const facts = [
    banks,
    `${study.cycles} ${study.cycles === 1 ? one : many}`,
    ...(haveSameModules(study) ? ['same modules in every candidate'] : []),
    `seed ${study.seed}`,
  ];
  return [
    ...wrapText(asciiText(study.title)),
    ...wrapText(asciiText(`${facts.join(', ')}; ${numberText(confidencePercent)} % interval below`)),
  ];
}

/** Whether all candidates are wired from one set of modules, of which there is more than one candidate. */
function haveSameModules({ candidates }: Study): boolean {
  const sets = candidates.map(({ strings }) => strings.flat().sort().join('\n'));
  return sets.length > 1 && sets.every((set) => set === sets[0]);
}
