import { existsSync } from 'node:fs';
import { readFile, stat } from 'node:fs/promises';
import { join } from 'node:path';
import { type BlockTask, blockCount } from '../outcomes/block.js';
import type { Study } from '../study/study.js';
import { FolderRefused } from './folder-refused.js';
import { type JournalEntry, readJournal } from './journal.js';
import { lookForHolders } from './lock.js';
import { allBlocks, commonInstances, instancesDue } from './plan.js';
import { instancesOfEnd } from './run-end.js';
import { blockFile, DESCRIPTION, RUN_FILE } from './run-folder.js';
import { readSessions, type Session } from './run-record.js';
import { errorCode, isSystemError } from './system-error.js';

/** How a run stands; `dead` if it neither goes on nor said how it ended, because it was killed or its machine stopped. */
export type RunStanding = 'running' | 'complete' | 'interrupted' | 'blocks missing' | 'failed' | 'dead';

/** What the folder of a run tells of it. */
export interface RunState {
  readonly standing: RunStanding;
  /** Process that holds the folder; null if none does. */
  readonly holder: { readonly pid: number; readonly host: string } | null;
  /** The latest call of `run` on the folder; null if its record is lost. */
  readonly session: Session | null;
  /** Finished blocks and all blocks of every candidate, twins included. */
  readonly candidates: readonly { readonly candidate: string; readonly done: number; readonly total: number }[];
  readonly done: number;
  readonly total: number;
  /** Sampled banks that every candidate has. */
  readonly instances: number;
  /** Sampled banks with which the run is complete: fewer than those of its study if it ended at a look. */
  readonly instancesDue: number;
  /** When the latest block was finished, ms since 1970; null before the first. */
  readonly lastBlockMs: number | null;
  /** Time that the missing blocks take on the threads of the session, s; null before the first block. */
  readonly leftS: number | null;
}

/**
 * Reads how a run stands from its folder, which is left as it is. Block files are looked for, not checked.
 *
 * @param keysOf simulation key of every candidate of a study
 * @throws FolderRefused if it is not the folder of a run or cannot be read
 */
export async function readRunState(
  path: string,
  keysOf: (study: Study) => ReadonlyMap<string, string>,
): Promise<{ readonly study: Study; readonly state: RunState }> {
  try {
    const { study, keys } = readStudyOf(path, await textOf(path, RUN_FILE.resolved), keysOf);
    const entries = readJournal((await textOf(path, RUN_FILE.journal)) ?? '').entries;
    const session = readSessions(await textOf(path, RUN_FILE.record)).at(-1) ?? null;
    const instances = instancesOfEnd(study, session, (await textOf(path, DESCRIPTION)) ?? null);
    const due = { ...study, instances };
    const finished = finishedBlocks(path, due, keys, entries);
    const holder = (await lookForHolders(path)).find(({ live }) => live) ?? null;
    const total = (blockCount(due) + 1) * study.candidates.length;
    const done = finished.length;
    return {
      study,
      state: {
        standing: standingOf(holder !== null, done === total, session),
        holder: holder && { pid: holder.pid, host: holder.host },
        session,
        candidates: study.candidates.map(({ key }) => ({
          candidate: key,
          done: finished.filter(({ candidate }) => candidate === key).length,
          total: blockCount(due) + 1,
        })),
        done,
        total,
        instances: commonInstances(due, finished),
        instancesDue: instances,
        lastBlockMs: entries.length === 0 ? null : (await stat(join(path, RUN_FILE.journal))).mtimeMs,
        leftS: secondsLeft(total - done, entries, session?.threads ?? 1),
      },
    };
  } catch (error) {
    throw isSystemError(error) ? new FolderRefused(`${path} cannot be read: ${error.message}`) : error;
  }
}

async function textOf(path: string, name: string): Promise<string | undefined> {
  try {
    return await readFile(join(path, name), 'utf8');
  } catch (error) {
    if (errorCode(error) === 'ENOENT' || errorCode(error) === 'ENOTDIR') return undefined;
    throw error;
  }
}

function readStudyOf(path: string, text: string | undefined, keysOf: (study: Study) => ReadonlyMap<string, string>) {
  if (text === undefined) throw new FolderRefused(`${path} is not the folder of a run: it has no ${RUN_FILE.resolved}`);
  try {
    const study: Study = JSON.parse(text);
    return { study, keys: keysOf(study) };
  } catch {
    throw new FolderRefused(`${join(path, RUN_FILE.resolved)} is not as a run left it; run the study again`);
  }
}

function finishedBlocks(
  path: string,
  study: Study,
  keys: ReadonlyMap<string, string>,
  entries: readonly JournalEntry[],
): readonly BlockTask[] {
  const byFile = new Map(entries.map((entry) => [blockFile(entry), entry]));
  return allBlocks(study).filter((task) => {
    const entry = byFile.get(blockFile(task));
    if (entry === undefined || entry.key !== keys.get(task.candidate)) return false;
    return entry.instances >= instancesDue(study, task.block) && existsSync(join(path, blockFile(task)));
  });
}

function standingOf(isHeld: boolean, isWhole: boolean, session: Session | null): RunStanding {
  if (isHeld) return 'running';
  const ended = session?.ended ?? null;
  if (ended === 'complete') return isWhole ? 'complete' : 'blocks missing';
  return ended ?? 'dead';
}

function secondsLeft(missing: number, entries: readonly JournalEntry[], threads: number): number | null {
  // Twins are a bank each and tell nothing of a block.
  const blocks = entries.filter(({ block }) => block > 0);
  if (missing === 0) return 0;
  if (blocks.length === 0) return null;
  const perBlockS = blocks.reduce((sum, { compute_s }) => sum + compute_s, 0) / blocks.length;
  return (missing * perBlockS) / Math.min(threads, missing);
}
