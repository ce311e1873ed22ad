import { join, parse } from 'node:path';
import { sha256 } from '../execution/checksum.js';
import { writeDurably } from '../execution/durable-file.js';
import { readJournal } from '../execution/journal.js';
import { makeFolder } from '../execution/make-folder.js';
import { RUN_FILE } from '../execution/run-folder.js';
import { errorCode } from '../execution/system-error.js';
import { renderSpiceDeck } from '../output/spice-deck.js';
import { renderBusCsv, renderDrawnCsv, renderEventsCsv, renderModulesCsv } from '../output/trace-csv.js';
import { type Trace, type TraceWindow, traceInstance } from '../simulation/trace-instance.js';
import { ENGINE } from '../study/engine.js';
import { leavesReference } from '../study/leaves-reference.js';
import { didYouMean } from '../study/nearest-name.js';
import { simulationKey } from '../study/simulation-key.js';
import type { Study } from '../study/study.js';
import { EXIT_STATUS, type ExitStatus } from './exit-status.js';
import { loadStudy } from './load-study.js';
import type { Shell } from './shell.js';

/** What `trace` is told on the command line. */
export interface TraceOptions {
  /** Study file, or the folder of a run. */
  readonly source: string;
  readonly candidate: string;
  readonly instance: number;
  /** The last two cycles if not said. */
  readonly fromCycle?: number | undefined;
  readonly toCycle?: number | undefined;
  readonly everyS?: number | undefined;
  readonly out?: string | undefined;
  /** File for the window as a circuit. */
  readonly netlist?: string | undefined;
  /** Leaves out of the trace what the circuit leaves out. */
  readonly likeForLike?: boolean | undefined;
  /** Of the program, for the head of the circuit. */
  readonly version: string;
}

const DEFAULT_EVERY_S = 60;
/** Rows of `modules.csv` beyond which a trace is refused: no spreadsheet opens them. */
const MOST_SAMPLES = 250_000;

/** Replays one sampled bank and writes its waveforms, events and drawn values. */
export async function traceCommand(options: TraceOptions, shell: Shell): Promise<ExitStatus> {
  const study = studyOf(options.source, shell);
  if (study === null) return EXIT_STATUS.input;
  const toCycle = options.toCycle ?? Math.min(study.cycles, (options.fromCycle ?? study.cycles) + 1);
  const fromCycle = options.fromCycle ?? Math.max(1, toCycle - 1);
  const everyS = options.everyS ?? DEFAULT_EVERY_S;
  const problem = problemOf(study, options.candidate, fromCycle, toCycle, everyS);
  if (problem !== null) {
    shell.err(`${problem}\n`);
    return EXIT_STATUS.input;
  }
  const { candidate, instance, likeForLike } = options;
  const window: TraceWindow = { candidate, instance, fromCycle, toCycle, everyS, likeForLike };
  const trace = traceInstance(study, window);
  const folder = options.out ?? defaultFolder(options);
  try {
    await writeTrace(folder, study, candidate, trace);
    if (options.netlist !== undefined) await writeDurably(options.netlist, deckOf(study, options, window, trace));
  } catch (error) {
    if (errorCode(error) === undefined) throw error;
    shell.err(`${folder} cannot be written: ${error instanceof Error ? error.message : String(error)}\n`);
    return EXIT_STATUS.input;
  }
  shell.out(renderSummary(options, fromCycle, toCycle, trace));
  shell.err(`drawn.csv, modules.csv, bus.csv and events.csv written to ${folder}\n`);
  return EXIT_STATUS.done;
}

/** The study of a file, or the one that a run folder was computed from, command line included. */
function studyOf(source: string, shell: Shell): Study | null {
  const resolved = join(source, RUN_FILE.resolved);
  if (!shell.exists(resolved)) return loadStudy(source, shell)?.study ?? null;
  const read = shell.readText(resolved);
  if ('problem' in read) {
    shell.err(`${resolved} cannot be read: ${read.problem}\n`);
    return null;
  }
  const journal = shell.readText(join(source, RUN_FILE.journal));
  const checksum = 'text' in journal ? readJournal(journal.text).study : null;
  if (sha256(read.text) !== checksum) {
    shell.err(`${resolved} must be as the run left it, by its checksum in ${RUN_FILE.journal}\n`);
    return null;
  }
  const study: Study = JSON.parse(read.text);
  return study;
}

function problemOf(study: Study, key: string, fromCycle: number, toCycle: number, everyS: number): string | null {
  const keys = study.candidates.map((candidate) => candidate.key);
  if (!keys.includes(key)) return `--candidate must be one of ${keys.join(', ')}, got ${key}${didYouMean(key, keys)}`;
  if (toCycle > study.cycles) return `--to-cycle must be at most ${study.cycles}, got ${toCycle}`;
  if (fromCycle > toCycle) return `--from-cycle must be at most --to-cycle (${toCycle}), got ${fromCycle}`;
  const samples = ((toCycle - fromCycle + 1) * study.duty.cycleS) / everyS;
  if (samples > MOST_SAMPLES) {
    return `--every must be longer or the window shorter: at most ${MOST_SAMPLES} instants, got ${Math.round(samples)}`;
  }
  return null;
}

/** Beside the results, never among them: a run folder holds what its run left and nothing else. */
function defaultFolder({ source, candidate, instance }: TraceOptions): string {
  const { name, dir } = parse(source);
  const base = parse(source).ext === '' ? join(dir, `${name}-traces`) : join('results', `${name}-traces`);
  return join(base, `${candidate}-${instance}`);
}

async function writeTrace(folder: string, study: Study, key: string, trace: Trace): Promise<void> {
  const { bank, factors, samples, events } = trace;
  const temperature = study.candidates.some((one) => one.key === key && leavesReference(study, one));
  const shown = { temperature, equaliser: bank.equaliser !== null };
  makeFolder(folder);
  await writeDurably(join(folder, 'drawn.csv'), await renderDrawnCsv(bank, factors, shown));
  await writeDurably(join(folder, 'modules.csv'), await renderModulesCsv(samples, shown));
  await writeDurably(join(folder, 'bus.csv'), await renderBusCsv(samples));
  await writeDurably(join(folder, 'events.csv'), await renderEventsCsv(bank, events));
}

function deckOf(study: Study, options: TraceOptions, window: TraceWindow, { circuit }: Trace): string {
  const candidate = study.candidates.find(({ key }) => key === window.candidate);
  if (candidate === undefined) throw new RangeError(`study must have a candidate ${window.candidate}`);
  return renderSpiceDeck(circuit, {
    ...window,
    source: options.source,
    title: study.title,
    seed: study.seed,
    likeForLike: options.likeForLike === true,
    version: options.version,
    engine: ENGINE,
    node: process.versions.node,
    simulationKey: simulationKey(study, candidate),
  });
}

/** How often each kind of event came, in a few lines. */
function renderSummary(
  { candidate, instance }: TraceOptions,
  fromCycle: number,
  toCycle: number,
  trace: Trace,
): string {
  const counts = new Map<string, number>();
  for (const { kind } of trace.events) counts.set(kind, (counts.get(kind) ?? 0) + 1);
  const lines = [...counts].map(([kind, count]) => `${String(count).padStart(6)}  ${kind}`);
  const head = `${candidate}, sampled bank ${instance}, cycles ${fromCycle} to ${toCycle}`;
  const body = lines.length > 0 ? lines : ['        nothing happened'];
  return `${[head, ...body].join('\n')}\n`;
}
