import type { BlockTask } from '../outcomes/block.js';
import type { Study } from '../study/study.js';
import { computeBlocks } from './compute-blocks.js';
import { blockName } from './lost-block.js';
import { commonInstances, instancesDue, planRun } from './plan.js';
import { BlockPool } from './pool.js';
import type { Progress } from './progress.js';
import { blockFile, type RunFolder } from './run-folder.js';

export interface ExecuteOptions {
  readonly study: Study;
  /** Simulation key of every candidate. */
  readonly keys: ReadonlyMap<string, string>;
  readonly folder: RunFolder;
  /** Compiled thread entry. */
  readonly workerFile: URL;
  readonly threads: number;
  /** Aborted, the run ends after the blocks in flight. */
  readonly stop: AbortSignal;
  readonly progress: Progress;
  /** Told of every block that is in the folder: those found there first, then each that is computed. */
  readonly onFinished?: ((task: BlockTask, isComputed: boolean) => void) | undefined;
}

export interface Execution {
  /** Sampled banks that every candidate has now. */
  readonly instances: number;
  /** Blocks that were there before. */
  readonly found: number;
  /** Blocks computed, twins included. */
  readonly computed: number;
  readonly missing: number;
  /** What ended the run before its end, if it was a failure. */
  readonly failure: unknown;
}

/** Computes what the folder lacks of a study. A failure is returned, not thrown, because what is finished still counts. */
export async function executeRun(options: ExecuteOptions): Promise<Execution> {
  const { study, keys, folder, progress } = options;
  const plan = await planRun(study, keys, folder);
  for (const task of plan.damaged) {
    progress.note(`${blockFile(task)} is not as it was written; computing it again`);
  }
  for (const task of plan.finished) options.onFinished?.(task, false);
  const computed: BlockTask[] = [];
  const failure = await computeMissing(options, plan.missing, computed);
  return {
    instances: commonInstances(study, [...plan.finished, ...computed]),
    found: plan.finished.length,
    computed: computed.length,
    missing: plan.missing.length - computed.length,
    failure,
  };
}

async function computeMissing(
  { study, keys, folder, workerFile, threads, stop, progress, onFinished }: ExecuteOptions,
  missing: readonly BlockTask[],
  computed: BlockTask[],
): Promise<unknown> {
  if (missing.length === 0) return undefined;
  const inFlight = Math.min(threads, missing.length);
  const pool = await BlockPool.start({
    workerFile,
    threads: inFlight,
    study,
    onRetry: (task, reason) => progress.note(`${blockName(task)}: its thread ended (${reason}); trying again`),
  });
  progress.update(0, missing.length);
  try {
    await computeBlocks({
      tasks: missing,
      inFlight,
      run: (task) => pool.run(task),
      keep: async (task, block) => {
        await folder.keep(task, keys.get(task.candidate) ?? '', instancesDue(study, task.block), block);
        computed.push(task);
        onFinished?.(task, true);
        progress.update(computed.length, missing.length);
      },
      stop,
    });
    return undefined;
  } catch (error) {
    return error;
  } finally {
    await pool.close();
    progress.end();
  }
}
