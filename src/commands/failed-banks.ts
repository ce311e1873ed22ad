import type { CandidateFailure } from '../execution/failed-instances.js';
import type { RunFolder } from '../execution/run-folder.js';
import { renderCsv } from '../output/csv.js';
import type { Study } from '../study/study.js';

/** Name of the list of banks that have no outcome; there only if there are any. */
export const FAILED_FILE = 'failed.csv';

const HEAD = ['candidate', 'instance', 'message', 'trace'];

/** Lists the banks without an outcome in the folder of their run, each with the command that replays it from there. */
export async function listFailedBanks(folder: RunFolder, failed: readonly CandidateFailure[]): Promise<void> {
  if (failed.length === 0) return folder.remove(FAILED_FILE);
  const rows = failed.map(({ candidate, instance, message }) => [
    candidate,
    instance,
    message,
    traceCommandOf('.', candidate, instance),
  ]);
  await folder.write(FAILED_FILE, await renderCsv(HEAD, rows));
}

/** A line for every candidate with banks that have no outcome. */
export function renderFailedBanks(
  study: Study,
  instances: number,
  failed: readonly CandidateFailure[],
  folder: string,
): string {
  return study.candidates
    .map(({ key }) => {
      const [first, ...others] = failed.filter(({ candidate }) => candidate === key);
      if (first === undefined) return '';
      const trace = traceCommandOf(folder, key, first.instance);
      return `${key}: ${others.length + 1} of ${instances} banks did not converge and are left out (${FAILED_FILE}); the first: ${trace}\n`;
    })
    .join('');
}

function traceCommandOf(folder: string, candidate: string, instance: number): string {
  return `motleybank trace ${folder} --candidate ${candidate} --instance ${instance}`;
}
