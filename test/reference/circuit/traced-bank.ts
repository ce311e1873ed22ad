import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { traceCommand } from '../../../src/commands/trace.js';
import { memoryShell } from '../../commands/memory-shell.js';
import type { ComparedEvent, Waveform } from '../contract.js';
import { type ReadTrace, readTrace } from '../read-trace.js';
import { type CircuitBank, circuitEvents, circuitWaveform } from './circuit-waveform.js';
import type { CircuitRun } from './run-deck.js';
import { runStubbornDeck } from './run-stubborn-deck.js';

/** A study whose candidate `bank` is traced, like for like with its deck. */
export interface StudyToTrace {
  readonly text: string;
  /** Files beside the study, by name. */
  readonly files: Readonly<Record<string, string>>;
  readonly fromCycle: number;
  readonly toCycle: number;
}

/** What the command `trace` wrote of the first sampled bank of a study. */
export interface TracedBank extends ReadTrace {
  readonly deck: string;
}

/** What a simulation of a bank gives, to be held against another. */
export interface Simulated {
  readonly waveform: Waveform;
  readonly events: readonly ComparedEvent[];
}

/** A deck as the simulator ran it: processor time of the run that came to its end, and how many were begun. */
export interface SimulatedDeck extends Simulated {
  readonly cpuS: number;
  readonly attempts: number;
}

const EVERY_S = 60;

/** Traces a bank through the command line. @throws Error with what the command says if it refuses */
export async function traceBank({ text, files, fromCycle, toCycle }: StudyToTrace): Promise<TracedBank> {
  const folder = await mkdtemp(join(tmpdir(), 'motleybank-circuit-'));
  try {
    const shell = memoryShell({ 'bank.yaml': text, ...files });
    const netlist = join(folder, 'bank.cir');
    const status = await traceCommand(
      {
        source: 'bank.yaml',
        candidate: 'bank',
        instance: 1,
        everyS: EVERY_S,
        fromCycle,
        toCycle,
        out: folder,
        netlist,
        likeForLike: true,
        version: 'test',
      },
      shell,
    );
    if (status !== 0) throw new Error(shell.printed.err);
    return { ...(await readTrace(folder)), deck: await readFile(netlist, 'utf8') };
  } finally {
    await rm(folder, { recursive: true });
  }
}

/** Runs the deck of a traced bank, and reads it at the instants of its trace. */
export async function simulateDeckOf(traced: TracedBank, deck = traced.deck): Promise<SimulatedDeck> {
  const run = await runStubbornDeck(deck);
  const bank = circuitOf(traced.waveform);
  // A deck begins with its window.
  const startS = traced.waveform.timeS[0];
  const shifted: CircuitRun = { ...run, timeS: run.timeS.map((timeS) => startS + timeS) };
  return {
    waveform: circuitWaveform(shifted, bank, traced.waveform.timeS),
    events: circuitEvents(shifted, bank),
    cpuS: run.cpuS,
    attempts: run.attempts,
  };
}

/** How our decks name what a trace shows. */
function circuitOf({ modules }: Waveform): CircuitBank {
  return {
    busV: (v) => v('v(bus)'),
    modules: modules.map(({ string, position, cells }) => {
      const name = `s${string}p${position}`;
      const of =
        (what: string) =>
        (v: (vector: string) => number): number =>
          v(`v(${name}${what})`);
      return {
        string,
        position,
        cells,
        currentA: of('_i'),
        terminalV: of('_v'),
        charge: Array.from({ length: cells }, (_, k) => of(`c${k + 1}_z`)),
        cellV: [of('_vmin'), of('_vmax')],
        chargeClosed: of('_chg'),
        dischargeClosed: of('_dsg'),
      };
    }),
  };
}
