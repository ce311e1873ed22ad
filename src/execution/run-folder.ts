import { existsSync } from 'node:fs';
import { readdir, readFile, rm } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import { type BlockTask, TWIN_BLOCK } from '../outcomes/block.js';
import { sha256 } from './checksum.js';
import type { ComputedBlock } from './compute-blocks.js';
import { UNFINISHED, writeDurably } from './durable-file.js';
import { FolderLost } from './folder-lost.js';
import { FolderRefused } from './folder-refused.js';
import { Journal } from './journal.js';
import { type FolderLock, isLockFile, takeLock } from './lock.js';
import { makeFolder } from './make-folder.js';
import { errorCode, isSystemError } from './system-error.js';

/** Names in a run folder, apart from the results. */
export const RUN_FILE = {
  study: 'study.yaml',
  resolved: 'study.resolved.json',
  inputs: 'inputs',
  outcomes: 'outcomes',
  journal: 'journal.jsonl',
  record: 'run.json',
} as const;

/** The file that describes the results of a run and all that they rest on, with checksums. */
export const DESCRIPTION = 'datapackage.json';

/** The folder of a run, held by this process until it is closed. */
export class RunFolder {
  readonly path: string;
  readonly journal: Journal;
  readonly #lock: FolderLock;

  private constructor(path: string, journal: Journal, lock: FolderLock) {
    this.path = path;
    this.journal = journal;
    this.#lock = lock;
  }

  /**
   * Takes a folder for a run, a new one if there is none.
   *
   * @param discard names of what an earlier run left that are removed first
   * @throws FolderRefused if it holds something else than a run, or a run that goes on, or cannot be written
   */
  static async open(path: string, discard: readonly string[]): Promise<RunFolder> {
    await refuseIfForeign(path);
    try {
      return await RunFolder.#take(path, discard);
    } catch (error) {
      // A folder of somebody else's, a medium that is read-only or full: not a fault of this program.
      throw isSystemError(error) ? unusable(path, error) : error;
    }
  }

  /** A folder that has been looked at, with its lock and its journal. */
  static async #take(path: string, discard: readonly string[]): Promise<RunFolder> {
    const lock = await takeLock(path);
    try {
      for (const name of discard) await rm(join(path, name), { recursive: true, force: true });
      await removeUnfinished(path);
      return new RunFolder(path, await Journal.open(join(path, RUN_FILE.journal)), lock);
    } catch (error) {
      await lock.release();
      throw error;
    }
  }

  /** @returns the text of a file in the folder, undefined if there is none */
  async read(name: string): Promise<string | undefined> {
    try {
      return await readFile(join(this.path, name), 'utf8');
    } catch (error) {
      if (errorCode(error) === 'ENOENT') return undefined;
      throw error;
    }
  }

  /** @throws FolderLost if the folder is not there any more: it is not made again, with a part of the run in it */
  async write(name: string, text: string): Promise<void> {
    if (!this.#lock.isHeld()) throw new FolderLost(`${this.path} was removed or moved while the run went on`);
    const path = join(this.path, name);
    makeFolder(dirname(path));
    await writeDurably(path, text);
  }

  /** Removes a file or folder, if it is there. */
  async remove(name: string): Promise<void> {
    await rm(join(this.path, name), { recursive: true, force: true });
  }

  /** Keeps the resolved study, and its checksum in the journal. */
  async keepStudy(text: string): Promise<void> {
    await this.write(RUN_FILE.resolved, text);
    const study = sha256(text);
    if (study !== this.journal.contents.study) await this.journal.append({ study });
  }

  /** Whether the resolved study is not as a run left it. */
  async isStudyDamaged(): Promise<boolean> {
    const { study } = this.journal.contents;
    if (study === null) return false;
    const text = await this.read(RUN_FILE.resolved);
    return text === undefined || sha256(text) !== study;
  }

  /** Keeps a block: first its file, then its line in the journal. */
  async keep(task: BlockTask, key: string, instances: number, { csv, computeS, failed }: ComputedBlock): Promise<void> {
    await this.write(blockFile(task), csv);
    const compute_s = Number(computeS.toFixed(3));
    const entry = { ...task, key, instances, sha256: sha256(csv), compute_s };
    await this.journal.append(failed === undefined ? entry : { ...entry, failed });
  }

  async close(): Promise<void> {
    await this.journal.close();
    await this.#lock.release();
  }
}

/** Path of a block within the run folder, with `/` as in the journal of every system. */
export function blockFile({ candidate, block }: BlockTask): string {
  const name = block === TWIN_BLOCK ? 'twin' : `block-${String(block).padStart(4, '0')}`;
  return `${RUN_FILE.outcomes}/${candidate}/${name}.csv`;
}

/** Removes blocks and locks that a run that ended suddenly was writing; what else it wrote is written anew. */
async function removeUnfinished(path: string): Promise<void> {
  const outcomes = join(path, RUN_FILE.outcomes);
  const blocks = existsSync(outcomes) ? await readdir(outcomes, { recursive: true }) : [];
  const unfinished = [
    ...blocks.filter((name) => name.endsWith(UNFINISHED)).map((name) => join(outcomes, name)),
    ...(await readdir(path)).filter(isUnfinishedLock).map((name) => join(path, name)),
  ];
  for (const name of unfinished) await rm(name, { force: true });
}

function isUnfinishedLock(name: string): boolean {
  return name.endsWith(UNFINISHED) && isLockFile(name.slice(0, -UNFINISHED.length));
}

/** Nothing is written into, or removed from, a folder that a run did not make. */
async function refuseIfForeign(path: string): Promise<void> {
  const names = await namesIn(path);
  if (names.includes(RUN_FILE.journal) || names.includes(RUN_FILE.resolved)) return;
  const other = names.find((name) => !isLockFile(name) && !name.endsWith(UNFINISHED));
  if (other !== undefined) throw new FolderRefused(`${path} is not the folder of a run: it holds ${other}`);
}

/** Names in a folder, which is made where there is none. */
async function namesIn(path: string): Promise<string[]> {
  try {
    makeFolder(path);
    return await readdir(path);
  } catch (error) {
    throw unusable(path, error);
  }
}

function unusable(path: string, error: unknown): FolderRefused {
  return new FolderRefused(`${path} cannot be used: ${error instanceof Error ? error.message : String(error)}`);
}
