import type { FailedInstance } from '../outcomes/block.js';
import { type BlockTask, blockCount, blockInstances, TWIN_BLOCK } from '../outcomes/block.js';
import type { Study } from '../study/study.js';
import { sha256 } from './checksum.js';
import { failuresWithin } from './failed-instances.js';
import { blockFile, type RunFolder } from './run-folder.js';

/** A finished block, with what it has no outcome of. */
export interface FinishedBlock extends BlockTask {
  readonly failed?: readonly FailedInstance[];
}

/** What a run has to do and what it finds done. */
export interface Plan {
  readonly finished: readonly FinishedBlock[];
  readonly missing: readonly BlockTask[];
  /** Those of the missing blocks that the journal calls finished though their file is gone or altered. */
  readonly damaged: readonly BlockTask[];
}

/**
 * All blocks of a study: the twins first, then block by block through the candidates, so that an interrupted run has
 * the same sampled banks in every candidate.
 */
export function allBlocks(study: Study): BlockTask[] {
  return Array.from({ length: blockCount(study) + 1 }, (_, block) =>
    study.candidates.map(({ key }) => ({ candidate: key, block })),
  ).flat();
}

/** Instances that a block of this study must hold, at least. */
export function instancesDue(study: Study, block: number): number {
  const { first, last } = blockInstances(block, study);
  return last - first + 1;
}

/**
 * Compares a study with what its folder holds. A block serves if it belongs to the candidate's simulation key, has
 * enough instances and is byte for byte what the journal says. Where more instances of a candidate have failed than may,
 * the blocks with failures do not serve: computing them tells the failures anew.
 *
 * @param allowed failed instances of each candidate
 */
export async function planRun(
  study: Study,
  keys: ReadonlyMap<string, string>,
  folder: RunFolder,
  allowed: number,
): Promise<Plan> {
  const { entries: all } = folder.journal.contents;
  const hasTooMany = (candidate: string) =>
    failuresWithin(study, all, study.instances).filter((failure) => failure.candidate === candidate).length > allowed;
  const entries = new Map(all.map((entry) => [blockFile(entry), entry]));
  const finished: FinishedBlock[] = [];
  const missing: BlockTask[] = [];
  const damaged: BlockTask[] = [];
  for (const task of allBlocks(study)) {
    const entry = entries.get(blockFile(task));
    if (entry?.key !== keys.get(task.candidate) || (entry?.instances ?? 0) < instancesDue(study, task.block)) {
      missing.push(task);
      continue;
    }
    if (entry?.failed !== undefined && hasTooMany(task.candidate)) {
      missing.push(task);
      continue;
    }
    const csv = await folder.read(blockFile(task));
    if (csv !== undefined && sha256(csv) === entry?.sha256) {
      finished.push(entry.failed === undefined ? task : { ...task, failed: entry.failed });
    } else {
      missing.push(task);
      damaged.push(task);
    }
  }
  return { finished, missing, damaged };
}

/**
 * Sampled banks that every candidate has, counted from instance 1 without a gap: all that may be summarised of a run
 * that ended early. 0 unless every twin is there.
 */
export function commonInstances(study: Study, finished: Iterable<BlockTask>): number {
  const names = new Set([...finished].map(blockFile));
  const isWhole = (block: number) =>
    study.candidates.every(({ key }) => names.has(blockFile({ candidate: key, block })));
  if (!isWhole(TWIN_BLOCK)) return 0;
  let blocks = 0;
  while (blocks < blockCount(study) && isWhole(blocks + 1)) blocks++;
  return Math.min(study.instances, blocks * study.blockSize);
}
