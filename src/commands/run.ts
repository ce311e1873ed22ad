import { availableParallelism } from 'node:os';
import { basename, join, parse } from 'node:path';
import { type Execution, executeRun, type Looks } from '../execution/execute-run.js';
import { FileOutcomes } from '../execution/file-outcomes.js';
import { FolderRefused } from '../execution/folder-refused.js';
import { LostBlock } from '../execution/lost-block.js';
import { Progress } from '../execution/progress.js';
import { refuseOtherRun } from '../execution/refuse-other-run.js';
import { blockFile, RUN_FILE, RunFolder } from '../execution/run-folder.js';
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
import { EXIT_STATUS, type ExitStatus } from './exit-status.js';
import { type LoadedStudy, loadStudy } from './load-study.js';
import { judgeRequirement, requirementFault } from './requirement.js';
import { renderClosing, renderEarlyEnd } from './run-messages.js';
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
  /** Candidate that must meet the acceptance lines, or the status tells. */
  readonly require?: string | undefined;
  /** Discards what an earlier run left in the folder. */
  readonly replace?: boolean | undefined;
  /** One JSON document in place of the table. */
  readonly json?: boolean | undefined;
  /** Results and faults only. */
  readonly quiet?: boolean | undefined;
}

/** All that a run leaves, to be discarded with `--replace`; anything else in the folder stays. */
const LEFT_BY_A_RUN = [...Object.values(RUN_FILE), ...Object.values(RESULT_FILES)];
const WORKER_FILE = new URL('../../workers/block.js', import.meta.url);

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
    if (!(error instanceof FolderRefused)) throw error;
    shell.err(`${error.message}\n`);
    return EXIT_STATUS.input;
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
  const inputs = await keepStudy(loaded, folder);
  const record = await RunRecord.begin(folder, threads, new Date());
  const progress = new Progress({
    write: options.quiet ? () => undefined : shell.err,
    terminal: shell.isTerminal.err,
    nowMs: shell.now,
  });
  const looks = looksOf(study, folder);
  const stop = shell.interruption;
  const execution = await executeRun({ study, keys, folder, workerFile, threads, stop, progress, looks });
  const end = endOf(execution);
  let answers: Answers | null = null;
  if (execution.instances > 0 && end !== 'failed') {
    answers = await answersOf(study, execution.instances, folder, inputs);
    shell.out(options.json ? renderJson(answers, study) : renderTable(answers, study, folder.path));
  }
  const durationMs = shell.now() - startMs;
  await record.end(end, durationMs / 1000);
  if (end === 'complete') {
    if (!options.quiet) shell.err(renderClosing(study, execution, { durationMs, threads, folder: folder.path }));
    if (options.require === undefined || answers === null) return EXIT_STATUS.done;
    const { status, message } = judgeRequirement(answers, options.require);
    if (!options.quiet) shell.err(`${message}\n`);
    return status;
  }
  const { failure } = execution;
  if (failure instanceof Error) shell.err(`${failure.message}\n`);
  shell.err(renderEarlyEnd(study, execution, folder.path));
  if (end === 'failed') throw failure;
  if (end === 'blocks missing') return EXIT_STATUS.blocksMissing;
  return shell.interruption.reason === 'SIGTERM' ? EXIT_STATUS.terminated : EXIT_STATUS.interrupted;
}

/** A thread that ends and a disk that is full are the machine's; anything else that fails is ours. */
function endOf({ failure, missing }: Execution): Exclude<SessionEnd, null> {
  if (failure instanceof LostBlock || isSystemError(failure)) return 'blocks missing';
  if (failure !== undefined) return 'failed';
  return missing === 0 ? 'complete' : 'interrupted';
}

/** Keeps the study as read, as resolved and with the files that it names. @returns names of those files */
async function keepStudy({ text, study, inputs }: LoadedStudy, folder: RunFolder): Promise<readonly string[]> {
  await folder.write(RUN_FILE.study, text);
  await folder.write(RUN_FILE.resolved, `${JSON.stringify(study, null, 2)}\n`);
  await folder.remove(RUN_FILE.inputs);
  const names: string[] = [];
  for (const [index, input] of inputs.entries()) {
    const name = `${RUN_FILE.inputs}/${String(index + 1).padStart(2, '0')}-${basename(input.path)}`;
    await folder.write(name, input.text);
    names.push(name);
  }
  return names;
}

/** Where a study may end before its last bank; undefined if its number of banks is fixed. */
function looksOf(study: Study, folder: RunFolder): Looks | undefined {
  if (study.enough === undefined) return undefined;
  const isEnough = async (instances: number): Promise<boolean> => {
    const outcomes = new FileOutcomes(folder, study, instances);
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
  instances: number,
  folder: RunFolder,
  inputs: readonly string[],
): Promise<Answers> {
  const outcomes = new FileOutcomes(folder, study, instances);
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
