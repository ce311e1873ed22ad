import { fileURLToPath } from 'node:url';
import type { Piscina } from 'piscina';
import type { BlockReply, BlockTask } from '../outcomes/block.js';
import type { Study } from '../study/study.js';
import { LostBlock } from './lost-block.js';

export interface PoolOptions {
  /** Compiled thread entry. */
  readonly workerFile: URL;
  readonly threads: number;
  /** Given to every thread once, when it starts; tasks carry names and numbers only. */
  readonly study: Study;
  /** Told when a block is tried again because its thread ended. */
  readonly onRetry: (task: BlockTask, reason: string) => void;
}

/** A block is computed at most this often: a thread may end for a reason that has passed, but not without limit. */
const ATTEMPTS = 3;

/** Threads that compute blocks. */
export class BlockPool {
  readonly #pool: Piscina<BlockTask, BlockReply>;
  readonly #workerFile: string;
  readonly #onRetry: PoolOptions['onRetry'];

  private constructor(pool: Piscina<BlockTask, BlockReply>, { workerFile, onRetry }: PoolOptions) {
    this.#pool = pool;
    this.#workerFile = fileURLToPath(workerFile);
    this.#onRetry = onRetry;
  }

  static async start(options: PoolOptions): Promise<BlockPool> {
    const { threads, study } = options;
    // Loaded here because most commands need no threads.
    const { Piscina: Pool } = await import('piscina');
    const pool = new Pool<BlockTask, BlockReply>({ minThreads: threads, maxThreads: threads, workerData: study });
    // A thread that ends between two blocks is replaced; nothing is lost.
    pool.on('error', () => undefined);
    return new BlockPool(pool, options);
  }

  /**
   * Computes a block on a thread. If the thread ends under it (out of memory, an exit, an error outside an instance)
   * the pool replaces the thread and the block is tried again.
   *
   * @throws LostBlock if that happens each time
   */
  async run(task: BlockTask): Promise<BlockReply> {
    for (let attempt = 1; ; attempt++) {
      try {
        // The entry is named with the task: one that fails while a thread starts would leave its task waiting for ever.
        return await this.#pool.run(task, { filename: this.#workerFile });
      } catch (error) {
        const reason = error instanceof Error ? error.message : String(error);
        if (attempt === ATTEMPTS) throw new LostBlock(task, reason);
        this.#onRetry(task, reason);
      }
    }
  }

  /** Ends the threads. Every `run` must have settled: closing a pool that is at work loses a reply. */
  async close(): Promise<void> {
    await this.#pool.destroy();
  }
}
