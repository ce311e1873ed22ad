import { availableParallelism } from 'node:os';
import { join } from 'node:path';
import { sha256 } from '../execution/checksum.js';
import { checkDescribedResults } from '../execution/described-results.js';
import { type JournalContents, readJournal } from '../execution/journal.js';
import { LostBlock } from '../execution/lost-block.js';
import { BlockPool } from '../execution/pool.js';
import { instancesOfEnd } from '../execution/run-end.js';
import { blockFile, DESCRIPTION, RUN_FILE } from '../execution/run-folder.js';
import { readSessions } from '../execution/run-record.js';
import { checkBlocks, findDifference, type StoredBlock, spreadSample, studyOfBlocks } from '../execution/verify-run.js';
import { ENGINE } from '../study/engine.js';
import { simulationKey } from '../study/simulation-key.js';
import type { Study } from '../study/study.js';
import { counted } from './counted.js';
import { EXIT_STATUS, type ExitStatus } from './exit-status.js';
import { STALL_MINUTES, WORKER_FILE } from './run.js';
import type { Shell } from './shell.js';

/** What `verify` is told on the command line. */
export interface VerifyOptions {
  /** Folder of a run. */
  readonly folder: string;
  /** Blocks to be computed again. */
  readonly blocks?: number | undefined;
  readonly threads?: number | undefined;
  /** One JSON document in place of the lines. */
  readonly json?: boolean | undefined;
}

const DEFAULT_BLOCKS = 8;

/** What was found of a folder; the document that `--json` prints. */
interface Verification {
  readonly folder: string;
  readonly blocks: { readonly intact: number; readonly missing: number; readonly recomputed: number };
  /** Whether the results and the study were compared: not while the run has left none. */
  readonly results_compared: boolean;
  /** A sentence each; none if all that was looked at is identical. */
  readonly findings: readonly string[];
}

/**
 * Looks whether the folder of a run is as it was written and a sample of its blocks is computed the same again. Writes
 * nothing, so a folder may be verified where it cannot be written, and while its run goes on.
 *
 * @param workerFile compiled thread entry
 */
export async function verifyCommand(
  options: VerifyOptions,
  shell: Shell,
  workerFile = WORKER_FILE,
): Promise<ExitStatus> {
  const { folder } = options;
  const read = (name: string) => {
    const file = shell.readText(join(folder, name));
    return 'text' in file ? file.text : null;
  };
  const [resolved, journal] = [read(RUN_FILE.resolved), read(RUN_FILE.journal)];
  if (resolved === null || journal === null) {
    const lacking = resolved === null ? RUN_FILE.resolved : RUN_FILE.journal;
    shell.err(`${folder} is not the folder of a run: ${lacking} cannot be read\n`);
    return EXIT_STATUS.input;
  }
  const contents = readJournal(journal);
  const damage = damageOf(contents, resolved);
  const session = readSessions(read(RUN_FILE.record) ?? undefined).at(-1) ?? null;
  const results = checkDescribedResults(session, comparedElsewhere(contents), read);
  const found = (blocks: Verification['blocks'], findings: readonly string[]): Verification => {
    return { folder, blocks, results_compared: results !== null, findings: [...findings, ...(results ?? [])] };
  };
  const study = sha256(resolved) === contents.study ? readResolved(resolved) : null;
  if (study === null) return report(found(NO_BLOCKS, damage), options, shell);
  const keys = new Map(study.candidates.map((candidate) => [candidate.key, simulationKey(study, candidate)]));
  const asked = contents.entries.filter(({ candidate }) => keys.has(candidate));
  if (asked.some(({ candidate, key }) => key !== keys.get(candidate))) {
    shell.err(`${folder} was not computed by engine ${ENGINE}, which this program has: it computes other outcomes\n`);
    return EXIT_STATUS.input;
  }
  const stored = checkBlocks(study, instancesOfEnd(study, session, read(DESCRIPTION)), asked, read);
  const sample = spreadSample(stored.intact, options.blocks ?? DEFAULT_BLOCKS);
  const pool = { study: studyOfBlocks(study, asked), threads: options.threads ?? availableParallelism(), workerFile };
  try {
    const differences = await recompute(sample, pool);
    const blocks = { intact: stored.intact.length, missing: stored.missing, recomputed: sample.length };
    return report(found(blocks, [...damage, ...stored.findings, ...differences]), options, shell);
  } catch (error) {
    if (!(error instanceof LostBlock)) throw error;
    shell.err(`${error.message}\n`);
    return EXIT_STATUS.blocksMissing;
  }
}

const NO_BLOCKS = { intact: 0, missing: 0, recomputed: 0 };

/** @returns checksums of the files that are compared with the journal */
function comparedElsewhere({ entries, study }: JournalContents): ReadonlyMap<string, string> {
  const checksums = new Map(entries.map((entry) => [blockFile(entry), entry.sha256]));
  return study === null ? checksums : checksums.set(RUN_FILE.resolved, study);
}

/** @returns a sentence for all that journal and resolved study tell of themselves */
function damageOf({ damagedLines, study }: JournalContents, resolved: string): string[] {
  const findings = damagedLines.map((line) => `${RUN_FILE.journal}, line ${line} is not as it was written`);
  if (study === null) findings.push(`${RUN_FILE.journal} does not tell the checksum of ${RUN_FILE.resolved}`);
  else if (sha256(resolved) !== study) findings.push(`${RUN_FILE.resolved} is not as it was written`);
  return findings;
}

/** A text whose checksum is that of a resolved study is one. */
function readResolved(text: string): Study {
  return JSON.parse(text);
}

/** @returns a sentence for every block that is not the same again */
async function recompute(
  sample: readonly StoredBlock[],
  { study, threads, workerFile }: { study: Study; threads: number; workerFile: URL },
): Promise<string[]> {
  if (sample.length === 0) return [];
  const pool = await BlockPool.start({
    workerFile,
    threads: Math.min(threads, sample.length),
    study,
    stallMs: STALL_MINUTES * 60_000,
    onRetry: () => undefined,
  });
  try {
    const differences: (string | null)[] = [];
    const waiting = sample.entries();
    // Lanes take from one iterator: a block that only waited for a thread would seem to hang.
    const lane = async () => {
      for (const [index, block] of waiting) differences[index] = findDifference(block, await pool.run(block.task));
    };
    await Promise.all(Array.from({ length: threads }, lane));
    return differences.filter((difference) => difference !== null);
  } finally {
    await pool.close();
  }
}

function report(verification: Verification, { json }: VerifyOptions, shell: Shell): ExitStatus {
  const { findings } = verification;
  shell.out(json ? `${JSON.stringify(verification, null, 2)}\n` : renderVerification(verification));
  return findings.length === 0 ? EXIT_STATUS.done : EXIT_STATUS.different;
}

function renderVerification({ folder, blocks, results_compared, findings }: Verification): string {
  const { intact, missing, recomputed } = blocks;
  const unfinished = missing === 0 ? '' : `, ${missing} not computed yet`;
  const results = results_compared ? ' and the results' : ', no results yet';
  const anew = recomputed === 0 ? 'none computed again' : `${recomputed} computed again`;
  const last =
    findings.length === 0
      ? `${folder} is as it was written: ${counted(intact, 'block')}${unfinished}${results}; ${anew}${recomputed === 0 ? '' : ' and identical'}`
      : `${folder} is not as it was: ${counted(findings.length, 'finding')}; ${counted(intact, 'block')} intact${unfinished}, ${anew}`;
  return `${[...findings, last].join('\n')}\n`;
}
