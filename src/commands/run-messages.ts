import type { Execution } from '../execution/execute-run.js';
import { clock } from '../execution/progress.js';
import type { Study } from '../study/study.js';
import { counted } from './counted.js';

const LONGEST_IN_SECONDS_MS = 600_000;

/** The line that closes a run that came to its end. */
export function renderClosing(
  study: Study,
  { instances, found, computed }: Execution,
  { durationMs, threads, folder }: { durationMs: number; threads: number; folder: string },
): string {
  const size = `${counted(instances, 'bank')} x ${counted(study.candidates.length, 'candidate')}`;
  if (computed === 0) return `${folder} is complete: ${size}; nothing was left to compute\n`;
  const share = found === 0 ? '' : `, ${computed} of ${found + computed} blocks computed`;
  const time = durationMs < LONGEST_IN_SECONDS_MS ? `${Math.round(durationMs / 1000)} s` : clock(durationMs);
  return `${size}${share} in ${time} on ${counted(threads, 'thread')}; written to ${folder}\n`;
}

/** What is said of a run that ended early. */
export function renderEarlyEnd(
  study: Study,
  { instances, missing, failure }: Execution,
  { folder, areResultsWritten }: { folder: string; areResultsWritten: boolean },
): string {
  const how = failure === undefined ? 'interrupted' : 'ended';
  const results = areResultsWritten ? 'the results are of those' : 'the results could not be written';
  const done =
    instances === 0
      ? 'before every candidate had a block: nothing to summarise'
      : `with ${instances} of ${study.enough === undefined ? '' : 'at most '}${counted(study.instances, 'bank')} in every candidate: ${results}`;
  return `${how} ${done}; ${counted(missing, 'block')} missing in ${folder}; the same command takes them up\n`;
}
