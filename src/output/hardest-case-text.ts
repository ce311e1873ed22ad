import type { Answers } from '../questions/answers.js';
import type { Study } from '../study/study.js';
import { periodWords } from './period-words.js';
import { wrapText } from './plain-text.js';
import { screenNumber } from './screen-number.js';

/**
 * The sampled bank that did worst and the command that replays it. The command keeps to one line, however long the path.
 *
 * @param folder of the run, as it is to be typed
 * @returns lines without line ends; none if no bank lost anything
 */
export function renderHardestCase({ hardestCase }: Answers, study: Study, folder: string): readonly string[] {
  if (hardestCase === null) return [];
  const { candidate, instance, lostCapacityPercent, loadLostCycles } = hardestCase;
  const facts = [
    ...(lostCapacityPercent === null ? [] : [`lost capacity ${screenNumber(lostCapacityPercent, 1)} %`]),
    ...(loadLostCycles === null ? [] : [loadLostWords(loadLostCycles, study)]),
  ];
  return [
    ...wrapText(`Hardest case: ${candidate}, instance ${instance}: ${facts.join(', ')}. To replay it:`),
    `  motleybank trace ${quoted(folder)} --candidate ${candidate} --instance ${instance}`,
  ];
}

function loadLostWords(cycles: number, study: Study): string {
  const { one, many } = periodWords(study);
  if (cycles === 0) return 'no load lost';
  return `load lost on ${cycles} ${cycles === 1 ? one : many}`;
}

/**
 * A path as it is to be typed: in double quotes if it has blanks, in single ones if a shell would run or replace parts of
 * it. Control characters are left out, because they would act on the terminal.
 */
function quoted(path: string): string {
  const visible = path.replace(/\p{Other}/gu, '');
  if (/^[\w./\\:-]+$/.test(visible)) return visible;
  if (!/["$`!%]/.test(visible)) return `"${visible}"`;
  return `'${visible.replaceAll("'", "'\\''")}'`;
}
