import { fileURLToPath } from 'node:url';
import type { Piscina } from 'piscina';
import type { BlockOrder, BlockReply, BlockTask } from '../outcomes/block.js';
import type { Study } from '../study/study.js';
import { LostBlock } from './lost-block.js';
import { watchBeats } from './watch-beats.js';

export interface PoolOptions {
  /** Compiled thread entry. */
  readonly workerFile: URL;
  readonly threads: number;
  /** Given to every thread once, when it starts; tasks carry names and numbers only. */
  readonly study: Study;
  /** A thread that finishes no instance for so long, in ms, hangs and is ended. */
  readonly stallMs: number;
  /** Told when a block is tried again because its thread ended. */
  readonly onRetry: (task: BlockTask, reason: string) => void;
}

/** A block is computed at most this often: a thread may end for a reason that has passed, but not without limit. */
const ATTEMPTS = 3;

/**
 * Memory of one thread for its objects, MiB: many times what a bank takes. Without a bound a thread that grows would take
 * the machine's, and the whole run would end with it.
 */
const THREAD_MIB = 1024;

/** Threads that compute blocks. */
export class BlockPool {
  readonly #pool: Piscina<BlockOrder, BlockReply>;
  readonly #workerFile: string;
  readonly #stallMs: number;
  readonly #onRetry: PoolOptions['onRetry'];

  private constructor(pool: Piscina<BlockOrder, BlockReply>, { workerFile, stallMs, onRetry }: PoolOptions) {
    this.#pool = pool;
    this.#workerFile = fileURLToPath(workerFile);
    this.#stallMs = stallMs;
    this.#onRetry = onRetry;
  }

  static async start(options: PoolOptions): Promise<BlockPool> {
    const { threads, study } = options;
    // Loaded here because most commands need no threads.
    const { Piscina: Pool } = await import('piscina');
    const pool = new Pool<BlockOrder, BlockReply>({
      minThreads: threads,
      maxThreads: threads,
      workerData: study,
      resourceLimits: { maxOldGenerationSizeMb: THREAD_MIB },
    });
    // A thread that ends between two blocks is replaced; nothing is lost.
    pool.on('error', () => undefined);
    return new BlockPool(pool, options);
  }

  /**
   * Computes a block on a thread. If the thread ends under it (out of memory, an exit, an error outside an instance) or
   * hangs and is ended, the pool replaces the thread and the block is tried again.
   *
   * @throws LostBlock if that happens each time
   */
  async run(task: BlockTask): Promise<BlockReply> {
    for (let attempt = 1; ; attempt++) {
      try {
        return await this.#attempt(task);
      } catch (error) {
        const reason = error instanceof Error ? error.message : String(error);
        if (attempt === ATTEMPTS) throw new LostBlock(task, reason);
        this.#onRetry(task, reason);
      }
    }
  }

  async #attempt(task: BlockTask): Promise<BlockReply> {
    const beats = new Int32Array(new SharedArrayBuffer(Int32Array.BYTES_PER_ELEMENT));
    const watch = watchBeats(beats, this.#stallMs);
    try {
      // The entry is named with the task: one that fails while a thread starts would leave its task waiting for ever.
      return await this.#pool.run({ task, beats }, { filename: this.#workerFile, signal: watch.stalled });
    } catch (error) {
      // The pool says only that the task was aborted.
      throw watch.stalled.aborted ? watch.stalled.reason : error;
    } finally {
      watch.end();
    }
  }

  /** Ends the threads. Every `run` must have settled: closing a pool that is at work loses a reply. */
  async close(): Promise<void> {
    await this.#pool.destroy();
  }
}
