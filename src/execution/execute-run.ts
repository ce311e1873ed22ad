import { type BlockTask, blockCount } from '../outcomes/block.js';
import type { Study } from '../study/study.js';
import { computeBlocks } from './compute-blocks.js';
import { allowedFailures, type CandidateFailure, failuresWithin } from './failed-instances.js';
import { blockName } from './lost-block.js';
import { commonInstances, type FinishedBlock, instancesDue, type Plan, planRun } from './plan.js';
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
  readonly onFinished?: ((block: FinishedBlock, isComputed: boolean) => void) | undefined;
  /** Absent: the run ends with the last block of the study. */
  readonly looks?: Looks | undefined;
}

/** Where a run may end before its last block. */
export interface Looks {
  /** Numbers of instances, ascending, whole blocks; the last is that of the study. */
  readonly at: readonly number[];
  /**
   * Asked when every candidate has so many instances, with those of them that have no outcome, and told of no more: only
   * then is the answer the same always.
   */
  readonly isEnough: (instances: number, failed: readonly CandidateFailure[]) => Promise<boolean>;
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

/**
 * Computes what the folder lacks of a study, up to the look at which it is enough. A failure is returned, not thrown,
 * because what is finished still counts.
 */
export async function executeRun(options: ExecuteOptions): Promise<Execution> {
  const { study, keys, folder, progress, looks } = options;
  const allowed = allowedFailures(study, options.mayFailFraction);
  const plan = await planRun(study, keys, folder, allowed);
  const { damagedLines } = folder.journal.contents;
  if (damagedLines.length > 0) progress.note(damagedLinesNote(damagedLines));
  for (const block of plan.finished) options.onFinished?.(block, false);
  const computed: FinishedBlock[] = [];
  for (const target of looks?.at ?? [study.instances]) {
    const upToLook = upTo(target, study, plan);
    const before = failuresWithin(study, [...plan.finished, ...computed], study.instances);
    const mayFail = (key: string) => allowed - before.filter(({ candidate }) => candidate === key).length;
    const failure = await computeUpTo(options, upToLook, computed, mayFail);
    const blocks = [...plan.finished, ...computed];
    const instances = commonInstances({ ...study, instances: target }, blocks);
    const failed = failuresWithin(study, blocks, instances);
    const isLast = instances < target || target === study.instances || (await looks?.isEnough(target, failed)) === true;
    if (!isLast) continue;
    return {
      instances,
      failed,
      found: upToLook.finished.length,
      computed: computed.length,
      missing: upToLook.missing.length - computed.length,
      failure,
    };
  }
  throw new RangeError('the last look is not that of the whole study');
}

/** The part of a plan whose blocks lie within so many instances. */
function upTo(instances: number, { blockSize }: Study, { finished, missing, damaged }: Plan): Plan {
  const last = blockCount({ instances, blockSize });
  const within = ({ block }: BlockTask): boolean => block <= last;
  return { finished: finished.filter(within), missing: missing.filter(within), damaged: damaged.filter(within) };
}

/** Computes what is missing of a plan and not among what is computed, to which it is added. */
async function computeUpTo(
  options: ExecuteOptions,
  { missing, damaged }: Plan,
  computed: FinishedBlock[],
  mayFail: (candidate: string) => number,
): Promise<unknown> {
  const done = new Set(computed.map(blockFile));
  const isLeft = (task: BlockTask): boolean => !done.has(blockFile(task));
  for (const task of damaged.filter(isLeft)) {
    options.progress.note(`${blockFile(task)} is not as it was written; computing it again`);
  }
  return computeMissing(options, missing.filter(isLeft), computed, mayFail);
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
  const before = computed.length;
  progress.update(before, before + missing.length);
  try {
    await computeBlocks({
      tasks: missing,
      inFlight,
      run: (task) => pool.run(task),
      keep: async (task, block) => {
        await folder.keep(task, keys.get(task.candidate) ?? '', instancesDue(study, task.block), block);
        const finished = block.failed === undefined ? task : { ...task, failed: block.failed };
        computed.push(finished);
        onFinished?.(finished, true);
        progress.update(computed.length, before + missing.length);
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
