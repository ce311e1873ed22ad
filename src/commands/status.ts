import { FolderRefused } from '../execution/folder-refused.js';
import { clock } from '../execution/progress.js';
import { type RunStanding, type RunState, readRunState } from '../execution/run-state.js';
import { simulationKey } from '../study/simulation-key.js';
import type { Study } from '../study/study.js';
import { counted } from './counted.js';
import { EXIT_STATUS, type ExitStatus } from './exit-status.js';
import type { Shell } from './shell.js';

/** What `status` is told on the command line. */
export interface StatusOptions {
  /** Folder of a run. */
  readonly folder: string;
  /** One JSON document in place of the lines. */
  readonly json?: boolean | undefined;
}

const STATUS_OF: Readonly<Record<RunStanding, ExitStatus>> = {
  running: EXIT_STATUS.running,
  complete: EXIT_STATUS.done,
  interrupted: EXIT_STATUS.blocksMissing,
  'blocks missing': EXIT_STATUS.blocksMissing,
  failed: EXIT_STATUS.blocksMissing,
  dead: EXIT_STATUS.blocksMissing,
};

/**
 * Tells from a folder alone whether its run goes on, how far it is and how long it still takes.
 *
 * @param wallMs time of day, ms since 1970
 */
export async function statusCommand(
  { folder, json }: StatusOptions,
  shell: Shell,
  wallMs: number,
): Promise<ExitStatus> {
  try {
    const { study, state } = await readRunState(folder, keysOf);
    shell.out(
      json ? `${JSON.stringify(documentOf(study, state), null, 2)}\n` : renderState(folder, study, state, wallMs),
    );
    return STATUS_OF[state.standing];
  } catch (error) {
    if (!(error instanceof FolderRefused)) throw error;
    shell.err(`${error.message}\n`);
    return EXIT_STATUS.input;
  }
}

function keysOf(study: Study): ReadonlyMap<string, string> {
  return new Map(study.candidates.map((candidate) => [candidate.key, simulationKey(study, candidate)]));
}

function documentOf(study: Study, { standing, lastBlockMs, ...state }: RunState): object {
  return {
    standing,
    holder: state.holder,
    session: state.session,
    blocks_done: state.done,
    blocks_total: state.total,
    instances: state.instances,
    instances_total: state.instancesDue,
    instances_of_study: study.instances,
    candidates: state.candidates,
    last_block: lastBlockMs === null ? null : new Date(lastBlockMs).toISOString(),
    left_s: state.leftS,
  };
}

function renderState(folder: string, study: Study, state: RunState, wallMs: number): string {
  const { standing, holder, session, candidates, done, total, instances, instancesDue, lastBlockMs, leftS } = state;
  const by = holder === null ? '' : ` (process ${holder.pid} on ${holder.host})`;
  const since = session === null ? '' : `, session of ${session.started} on ${counted(session.threads, 'thread')}`;
  // A clock may have been set back since.
  const last = lastBlockMs === null ? '' : `, the latest ${clock(Math.max(0, wallMs - lastBlockMs))} ago`;
  const atLook = instancesDue < study.instances ? ` (enough at that look, of at most ${study.instances})` : '';
  const width = Math.max(...candidates.map(({ candidate }) => candidate.length));
  const rest = [
    ...(done < total && leftS !== null ? [`about ${clock(leftS * 1000)} left on that many threads`] : []),
    ...(done < total && standing !== 'running' ? ['the same command as before takes up what is missing'] : []),
  ];
  const lines = [
    `${folder}: ${WORDS[standing]}${by}${since}`,
    `${done} of ${total} blocks${last}; ${instances} of ${counted(instancesDue, 'bank')} in every candidate${atLook}`,
    ...candidates.map((one) => `  ${one.candidate.padEnd(width)}  ${one.done} of ${one.total} blocks`),
    ...rest,
  ];
  return `${lines.join('\n')}\n`;
}

const WORDS: Readonly<Record<RunStanding, string>> = {
  running: 'running',
  complete: 'complete',
  interrupted: 'interrupted',
  'blocks missing': 'ended with blocks missing',
  failed: 'ended by a fault',
  dead: 'dead: it ended without a word, killed or with its machine',
};
