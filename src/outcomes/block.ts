import { checkpointCycles } from '../measures/checkpoint-cycles.js';
import type { OutcomeLayout } from './columns.js';

/**
 * A unit of work by name only: the study is already where the work is done. Block 0 is the candidate's twin, which is
 * instance 0 alone; blocks of sampled banks count from 1.
 */
export interface BlockTask {
  readonly candidate: string;
  readonly block: number;
}

/** What a thread is handed: the block, and a count that it raises at each instance, so that one that hangs shows. */
export interface BlockOrder {
  readonly task: BlockTask;
  /** One number in shared memory. */
  readonly beats: Int32Array<SharedArrayBuffer>;
}

/** An instance that has no outcome, and never a row, because its simulation did not converge. */
export interface FailedInstance {
  readonly instance: number;
  readonly message: string;
}

/** What comes back: the block as it is kept, or the instance under which the thread met a mistake in the program. */
export type BlockReply =
  | {
      readonly csv: string;
      readonly computeS: number;
      /** Ascending; absent if there are none, as almost always. */
      readonly failed?: readonly FailedInstance[];
    }
  | { readonly fault: { readonly instance: number; readonly message: string; readonly stack: string } };

/** Block number of the twin. */
export const TWIN_BLOCK = 0;

/** First and last instance of a block, inclusive. */
export interface InstanceRange {
  readonly first: number;
  readonly last: number;
}

/** What of a study fixes its blocks. */
export interface BlockSizing {
  readonly instances: number;
  readonly blockSize: number;
}

/** Instances of a block; the last block of a study is short if the count is no multiple of the block size. */
export function blockInstances(block: number, { instances, blockSize }: BlockSizing): InstanceRange {
  if (block === TWIN_BLOCK) return { first: 0, last: 0 };
  return { first: (block - 1) * blockSize + 1, last: Math.min(block * blockSize, instances) };
}

/** Number of blocks of sampled banks, the twin's not counted. */
export function blockCount({ instances, blockSize }: BlockSizing): number {
  return Math.ceil(instances / blockSize);
}

/** Layout of a candidate's outcomes from what a resolved study says about it. */
export function outcomeLayout(
  study: { readonly cycles: number },
  candidate: { readonly wiring: string; readonly strings: readonly (readonly string[])[] },
): OutcomeLayout {
  return {
    strings: candidate.strings.length,
    // A native pack is one module with one BMS, however many its cells came from.
    positions: candidate.wiring === 'native' ? 1 : candidate.strings[0].length,
    checkpoints: checkpointCycles(study.cycles),
  };
}
