import type { BlockTask } from '../outcomes/block.js';
import type { Study } from '../study/study.js';
import { computeBlocks } from './compute-blocks.js';
import { allowedFailures, type CandidateFailure, failuresWithin } from './failed-instances.js';
import { blockName } from './lost-block.js';
import { commonInstances, type FinishedBlock, instancesDue, planRun } from './plan.js';
import { BlockPool } from './pool.js';
import type { Progress } from './progress.js';
import { blockFile, RUN_FILE, type RunFolder } from './run-folder.js';

export interface ExecuteOptions {
  readonly study: Study;
  /** Simulation key of every candidate. */
  readonly keys: ReadonlyMap<string, string>;
  readonly folder: RunFolder;
  /** Compiled thread entry. */
  readonly workerFile: URL;
  readonly threads: number;
  /** A thread that finishes no instance for so long, in ms, hangs: its block is tried again on another. */
  readonly stallMs: number;
  /** Share of the instances that may fail in each candidate, 0 to 1. */
  readonly mayFailFraction: number;
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
  /** Those of the instances that have no outcome. */
  readonly failed: readonly CandidateFailure[];
  /** What ended the run before its end, if it was a failure. */
  readonly failure: unknown;
}

/** Computes what the folder lacks of a study. A failure is returned, not thrown, because what is finished still counts. */
export async function executeRun(options: ExecuteOptions): Promise<Execution> {
  const { study, keys, folder, progress } = options;
  const allowed = allowedFailures(study, options.mayFailFraction);
  const plan = await planRun(study, keys, folder, allowed);
  const { damagedLines } = folder.journal.contents;
  if (damagedLines.length > 0) progress.note(damagedLinesNote(damagedLines));
  for (const task of plan.damaged) {
    progress.note(`${blockFile(task)} is not as it was written; computing it again`);
  }
  for (const task of plan.finished) options.onFinished?.(task, false);
  const computed: FinishedBlock[] = [];
  const before = failuresWithin(study, plan.finished, study.instances);
  const mayFail = (key: string) => allowed - before.filter(({ candidate }) => candidate === key).length;
  const failure = await computeMissing(options, plan.missing, computed, mayFail);
  const blocks = [...plan.finished, ...computed];
  const instances = commonInstances(study, blocks);
  return {
    instances,
    failed: failuresWithin(study, blocks, instances),
    found: plan.finished.length,
    computed: computed.length,
    missing: plan.missing.length - computed.length,
    failure,
  };
}

function damagedLinesNote(lines: readonly number[]): string {
  const which =
    lines.length === 1 ? `line ${lines[0]} is` : `${lines.length} lines, the first of them ${lines[0]}, are`;
  return `${RUN_FILE.journal}: ${which} not as written; computing again what they stood for`;
}

async function computeMissing(
  { study, keys, folder, workerFile, threads, stallMs, stop, progress, onFinished }: ExecuteOptions,
  missing: readonly BlockTask[],
  computed: FinishedBlock[],
  mayFail: (candidate: string) => number,
): Promise<unknown> {
  if (missing.length === 0) return undefined;
  const inFlight = Math.min(threads, missing.length);
  const pool = await BlockPool.start({
    workerFile,
    threads: inFlight,
    study,
    stallMs,
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
        computed.push(block.failed === undefined ? task : { ...task, failed: block.failed });
        onFinished?.(task, true);
        progress.update(computed.length, missing.length);
      },
      mayFail,
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
