import type { BlockReply, BlockTask, FailedInstance } from '../outcomes/block.js';
import { InstanceFault } from './instance-fault.js';

/** A block as a thread returned it. */
export interface ComputedBlock {
  readonly csv: string;
  /** Time of one thread, s. */
  readonly computeS: number;
  /** Instances without an outcome; absent if there are none. */
  readonly failed?: readonly FailedInstance[];
}

export interface ComputeOptions {
  /** In the order in which they are begun; results must not depend on it. */
  readonly tasks: readonly BlockTask[];
  /** Blocks in flight at a time: one per thread. */
  readonly inFlight: number;
  readonly run: (task: BlockTask) => Promise<BlockReply>;
  /** Keeps a block for good; the next block of the same thread waits for it. */
  readonly keep: (task: BlockTask, block: ComputedBlock) => Promise<void>;
  /** Instances of a candidate that may still fail; one more ends the run. */
  readonly mayFail: (candidate: string) => number;
  /** Once aborted, no further block is begun; those in flight are finished and kept. */
  readonly stop: AbortSignal;
}

/**
 * Computes blocks, as many at a time as there are threads.
 *
 * Blocks are kept as they come, so that an interruption costs only those in flight. Nothing is summed here: whoever
 * summarises reads them in block order, because sums of floating-point numbers depend on order.
 *
 * @throws InstanceFault or LostBlock, the first that occurs, after the blocks in flight are kept
 */
export async function computeBlocks({ tasks, inFlight, run, keep, mayFail, stop }: ComputeOptions): Promise<void> {
  const failure = new AbortController();
  const waiting = tasks.values();
  const failures = new Map<string, number>();
  const lane = async () => {
    while (!stop.aborted && !failure.signal.aborted) {
      const next = waiting.next();
      if (next.done) return;
      const reply = await run(next.value);
      if ('fault' in reply) throw new InstanceFault(next.value.candidate, reply.fault);
      if (reply.failed !== undefined) {
        const { candidate } = next.value;
        const count = (failures.get(candidate) ?? 0) + reply.failed.length;
        failures.set(candidate, count);
        if (count > mayFail(candidate)) throw InstanceFault.ofFailed(candidate, reply.failed);
      }
      await keep(next.value, reply);
    }
  };
  const lanes = Array.from({ length: inFlight }, () =>
    lane().catch((error: unknown) => {
      if (!failure.signal.aborted) failure.abort(error);
    }),
  );
  await Promise.all(lanes);
  failure.signal.throwIfAborted();
}
