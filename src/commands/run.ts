import { availableParallelism } from 'node:os';
import { basename, join, parse } from 'node:path';
import { type ExecuteOptions, type Execution, executeRun, type Looks } from '../execution/execute-run.js';
import { FileOutcomes } from '../execution/file-outcomes.js';
import { isOfTheMachine } from '../execution/folder-lost.js';
import { FolderRefused } from '../execution/folder-refused.js';
import { LostBlock } from '../execution/lost-block.js';
import { Progress } from '../execution/progress.js';
import { refuseOtherRun } from '../execution/refuse-other-run.js';
import { blockFile, RUN_FILE, RunFolder } from '../execution/run-folder.js';
import { RunLog } from '../execution/run-log.js';
import { RunRecord, type SessionEnd } from '../execution/run-record.js';
import { isSystemError } from '../execution/system-error.js';
import { blockCount, TWIN_BLOCK } from '../outcomes/block.js';
import { renderJson } from '../output/json-table.js';
import { renderTable } from '../output/table.js';
import { RESULT_FILES, writeResults } from '../output/write-results.js';
import { answerStudy } from '../questions/answer-study.js';
import type { Answers } from '../questions/answers.js';
import { takeLook } from '../questions/enough.js';
import { ENGINE } from '../study/engine.js';
import { simulationContent, simulationKey } from '../study/simulation-key.js';
import type { Study } from '../study/study.js';
import { EXIT_STATUS, type ExitStatus, STATUS_OF_SIGNAL } from './exit-status.js';
import { FAILED_FILE, listFailedBanks, renderFailedBanks } from './failed-banks.js';
import { type LoadedStudy, loadStudy } from './load-study.js';
import { judgeRequirement, requirementFault } from './requirement.js';
import { renderClosing, renderEarlyEnd } from './run-messages.js';
import { RunWatch } from './run-watch.js';
import type { Shell } from './shell.js';

/** What `run` is told on the command line. */
export interface RunOptions {
  /** Study file. */
  readonly study: string;
  /** Folder of the run; `results/<study file name>` if not said. */
  readonly out?: string | undefined;
  readonly seed?: string | undefined;
  readonly instances?: number | undefined;
  /** Threads, as many as the machine runs at once if not said. Never changes a result. */
  readonly threads?: number | undefined;
  /** Minutes after which a thread that finishes no bank counts as hanging. */
  readonly stallMinutes?: number | undefined;
  /** Percentage of the banks that may fail to converge in each candidate; 0 if not said. */
  readonly mayFailPercent?: number | undefined;
  /** Candidate that must meet the acceptance lines, or the status tells. */
  readonly require?: string | undefined;
  /** Discards what an earlier run left in the folder. */
  readonly replace?: boolean | undefined;
  /** One JSON document in place of the table. */
  readonly json?: boolean | undefined;
  /** Results and faults only. */
  readonly quiet?: boolean | undefined;
  /** File to which a JSON object per line is appended. */
  readonly log?: string | undefined;
}

/** All that a run leaves, to be discarded with `--replace`; anything else in the folder stays. */
const LEFT_BY_A_RUN = [...Object.values(RUN_FILE), ...Object.values(RESULT_FILES), FAILED_FILE];
/** Characters: four bytes each at most, and no file system has names of more than 255. */
const LONGEST_KEPT_NAME = 60;
/** Many times what a bank takes over decades, and short against a night. */
export const STALL_MINUTES = 10;
/** Compiled thread entry. */
export const WORKER_FILE = new URL('../../workers/block.js', import.meta.url);

/**
 * Runs a study: computes what its folder lacks, answers its questions and prints the table.
 *
 * @param workerFile compiled thread entry
 * @throws InstanceFault if a simulation fails, which is a fault of this program
 */
export async function runCommand(options: RunOptions, shell: Shell, workerFile = WORKER_FILE): Promise<ExitStatus> {
  const loaded = loadStudy(options.study, shell, { seed: options.seed, instances: options.instances });
  if (loaded === null) return EXIT_STATUS.input;
  const fault = options.require === undefined ? null : requirementFault(loaded.study, options.require);
  if (fault !== null) {
    shell.err(`${fault}\n`);
    return EXIT_STATUS.input;
  }
  const path = options.out ?? join('results', parse(options.study).name);
  try {
    const folder = await RunFolder.open(path, options.replace ? LEFT_BY_A_RUN : []);
    try {
      return await runInFolder(loaded, folder, options, shell, workerFile);
    } finally {
      await folder.close();
    }
  } catch (error) {
    if (error instanceof FolderRefused) {
      shell.err(`${error.message}\n`);
      return EXIT_STATUS.input;
    }
    if (!isOfTheMachine(error)) throw error;
    shell.err(`${error.message}\nended; what was finished before is kept in ${path}\n`);
    return EXIT_STATUS.blocksMissing;
  }
}

async function runInFolder(
  loaded: LoadedStudy,
  folder: RunFolder,
  options: RunOptions,
  shell: Shell,
  workerFile: URL,
): Promise<ExitStatus> {
  const { study } = loaded;
  const startMs = shell.now();
  const threads = options.threads ?? availableParallelism();
  const keys = new Map(study.candidates.map((candidate) => [candidate.key, simulationKey(study, candidate)]));
  await refuseOtherRun(study, keys, simulationContent, folder);
  const progress = new Progress({
    write: options.quiet ? () => undefined : shell.err,
    terminal: shell.isTerminal.err,
    nowMs: shell.now,
    onNote: (text) => log.write({ event: 'note', text }),
  });
  const log = openLog(options.log, progress);
  if (await folder.isStudyDamaged()) progress.note(`${RUN_FILE.resolved} is not as it was written; writing it again`);
  const inputs = await keepStudy(loaded, folder);
  const record = await RunRecord.begin(folder, threads, new Date());
  log.write({
    event: 'started',
    study: loaded.file,
    folder: folder.path,
    engine: ENGINE,
    seed: study.seed,
    threads,
    instances: study.instances,
    candidates: [...keys.keys()],
  });
  const stop = shell.interruption();
  const stallMs = (options.stallMinutes ?? STALL_MINUTES) * 60_000;
  const mayFailFraction = (options.mayFailPercent ?? 0) / 100;
  const looks = looksOf(study, folder);
  const task = { study, keys, folder, workerFile, threads, stallMs, mayFailFraction, stop, progress, looks };
  const computed = await executeWatched(task, log);
  const hasResults = computed.instances > 0 && endOf(computed) !== 'failed';
  let answers: Answers | null = null;
  const unwritten = await troubleIn(async () => {
    if (!hasResults) return;
    answers = await answersOf(study, computed, folder, inputs);
    shell.out(options.json ? renderJson(answers, study) : renderTable(answers, study, folder.path));
    await listFailedBanks(folder, computed.failed);
  });
  const execution = { ...computed, failure: computed.failure ?? unwritten };
  shell.err(renderFailedBanks(study, computed.instances, computed.failed, folder.path));
  const end = endOf(execution);
  const durationMs = shell.now() - startMs;
  // Nothing depends on the record: where it cannot be written, what stopped that has been told.
  await troubleIn(() => record.end(end, durationMs / 1000, hasResults && unwritten === undefined));
  log.write({
    event: 'ended',
    how: end,
    instances: execution.instances,
    blocks_missing: execution.missing,
    duration_s: Number((durationMs / 1000).toFixed(3)),
    ...(execution.failure instanceof Error && { failure: execution.failure.message }),
  });
  if (end === 'complete') {
    if (!options.quiet) shell.err(renderClosing(study, execution, { durationMs, threads, folder: folder.path }));
    if (options.require === undefined || answers === null) return EXIT_STATUS.done;
    const { status, message } = judgeRequirement(answers, options.require);
    if (!options.quiet) shell.err(`${message}\n`);
    return status;
  }
  const { failure } = execution;
  if (failure instanceof Error) shell.err(`${failure.message}\n`);
  shell.err(renderEarlyEnd(study, execution, { folder: folder.path, areResultsWritten: unwritten === undefined }));
  if (end === 'failed') throw failure;
  if (end === 'blocks missing') return EXIT_STATUS.blocksMissing;
  const signal: keyof typeof STATUS_OF_SIGNAL = stop.reason;
  return STATUS_OF_SIGNAL[signal];
}

/** @returns what of the machine kept something from being done, undefined if it was done */
async function troubleIn(deed: () => Promise<void>): Promise<Error | undefined> {
  try {
    await deed();
    return undefined;
  } catch (error) {
    if (isOfTheMachine(error)) return error;
    throw error;
  }
}

/** @throws FolderRefused if the log cannot be written */
function openLog(path: string | undefined, progress: Progress): RunLog {
  const log = new RunLog(path, (reason) => progress.line(`the log goes no further: ${reason}`));
  try {
    log.open();
    return log;
  } catch (error) {
    if (!isSystemError(error)) throw error;
    throw new FolderRefused(`${path} cannot be written: ${error.message}`);
  }
}

/** Computes what is missing; every minute the screen and the log are told how it goes. */
async function executeWatched(options: ExecuteOptions, log: RunLog): Promise<Execution> {
  const watch = new RunWatch(options.study, options.folder, options.progress, log);
  watch.start();
  try {
    return await executeRun({ ...options, onFinished: (task, isComputed) => watch.finished(task, isComputed) });
  } finally {
    await watch.stop();
  }
}

/** A thread that ends and a disk that is full are the machine's; anything else that fails is ours. */
function endOf({ failure, missing }: Execution): Exclude<SessionEnd, null> {
  if (failure instanceof LostBlock || isOfTheMachine(failure)) return 'blocks missing';
  if (failure !== undefined) return 'failed';
  return missing === 0 ? 'complete' : 'interrupted';
}

/** Keeps the study as read, as resolved and with the files that it names. @returns names of those files */
async function keepStudy({ text, study, inputs }: LoadedStudy, folder: RunFolder): Promise<readonly string[]> {
  await folder.write(RUN_FILE.study, text);
  await folder.keepStudy(`${JSON.stringify(study, null, 2)}\n`);
  await folder.remove(RUN_FILE.inputs);
  const names: string[] = [];
  for (const [index, input] of inputs.entries()) {
    const name = `${RUN_FILE.inputs}/${String(index + 1).padStart(2, '0')}-${portableName(input.path)}`;
    await folder.write(name, input.text);
    names.push(name);
  }
  return names;
}

/** The end of a file's name in characters that names may have on every system. */
function portableName(path: string): string {
  return [...basename(path).replace(/[^\p{L}\p{M}\p{N}._ -]/gu, '_')].slice(-LONGEST_KEPT_NAME).join('');
}

/** Where a study may end before its last bank; undefined if its number of banks is fixed. */
function looksOf(study: Study, folder: RunFolder): Looks | undefined {
  if (study.enough === undefined) return undefined;
  const isEnough: Looks['isEnough'] = async (instances, failed) => {
    const outcomes = new FileOutcomes(folder, study, instances, { failed });
    try {
      return (await takeLook(study, outcomes, instances)).enough;
    } finally {
      await outcomes.close();
    }
  };
  return { at: study.enough.looks, isEnough };
}

/** Answers the questions and writes the answers. */
async function answersOf(
  study: Study,
  { instances, failed }: Execution,
  folder: RunFolder,
  inputs: readonly string[],
): Promise<Answers> {
  const outcomes = new FileOutcomes(folder, study, instances, { failed });
  try {
    const answers = await answerStudy(study, outcomes);
    const provenance = {
      engine: ENGINE,
      nodeMajor: Number.parseInt(process.versions.node, 10),
      architecture: process.arch,
    };
    const blocks = Array.from(
      { length: blockCount({ instances, blockSize: study.blockSize }) },
      (_, index) => index + 1,
    );
    await writeResults(folder, study, answers, provenance, {
      outcomes: study.candidates.map(({ key: candidate }) => ({
        candidate,
        twin: blockFile({ candidate, block: TWIN_BLOCK }),
        blocks: blocks.map((block) => blockFile({ candidate, block })),
      })),
      inputs,
    });
    return answers;
  } finally {
    await outcomes.close();
  }
}
