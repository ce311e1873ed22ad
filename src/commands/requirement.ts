import { acceptanceSentence } from '../output/acceptance-text.js';
import type { Answers } from '../questions/answers.js';
import { didYouMean } from '../study/nearest-name.js';
import type { Study } from '../study/study.js';
import { EXIT_STATUS, type ExitStatus } from './exit-status.js';

/** @returns what keeps a candidate from being required, null if nothing does */
export function requirementFault(study: Study, required: string): string | null {
  const names = study.candidates.map(({ key }) => key);
  if (!names.includes(required)) {
    return `--require must be a candidate of the study, got "${required}"${didYouMean(required, names)}`;
  }
  return study.acceptance.length > 0 ? null : '--require needs acceptance lines in the study, which has none';
}

/**
 * How a required candidate stands to the acceptance lines of its study.
 *
 * @returns the status of the command, and a sentence that names the lines that are not met
 */
export function judgeRequirement(
  { verdicts }: Pick<Answers, 'verdicts'>,
  required: string,
): { readonly status: ExitStatus; readonly message: string } {
  const judged = verdicts.find(({ candidate }) => candidate === required);
  if (judged === undefined) throw new RangeError(`no verdict on ${required}`);
  const { verdict, lines } = judged;
  const open = lines.filter((line) => line.verdict !== 'meets' && line.verdict !== 'not applicable');
  const which = open.map((line) => `${line.verdict}: ${acceptanceSentence(line.line)}`);
  const message = [`required ${required}: ${verdict}`, ...which].join('\n  ');
  return { status: statusOf(verdict), message };
}

/** Lines none of which applies decide nothing. */
function statusOf(verdict: Answers['verdicts'][number]['verdict']): ExitStatus {
  if (verdict === 'meets') return EXIT_STATUS.done;
  return verdict === 'fails' ? EXIT_STATUS.requirementNotMet : EXIT_STATUS.requirementNotDecided;
}
