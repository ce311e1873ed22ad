import { fork } from 'node:child_process';
import { fileURLToPath } from 'node:url';

/** What a circuit simulator made of a deck. */
export interface CircuitRun {
  readonly timeS: Float64Array;
  /** Saved vectors but time by their name, such as `v(bus)`; one value for every instant of `timeS`. */
  readonly vectors: ReadonlyMap<string, Float64Array>;
  /** Processor time of the run, without the start of the simulator. */
  readonly cpuS: number;
}

type Answer =
  | { readonly complaint: string }
  | { readonly columns: readonly { readonly name: string; readonly values: Float64Array }[]; readonly cpuS: number };

const CHILD = fileURLToPath(new URL('simulate-deck.mjs', import.meta.url));
const DEFAULT_LIMIT_S = 3600;

/**
 * Runs a deck with a transient analysis in a process of its own.
 *
 * @throws Error with the simulator's words if it refuses the deck or gives up, and after `limitS`
 */
export async function runDeck(deck: string, limitS = DEFAULT_LIMIT_S): Promise<CircuitRun> {
  const answer = await answerTo(deck, limitS);
  if ('complaint' in answer) throw new Error(`the circuit simulator says: ${answer.complaint}`);
  const named = new Map(answer.columns.map(({ name, values }) => [name, values]));
  const timeS = named.get('time');
  if (timeS === undefined) throw new Error('the deck must have a transient analysis');
  named.delete('time');
  return { timeS, vectors: named, cpuS: answer.cpuS };
}

function answerTo(deck: string, limitS: number): Promise<Answer> {
  return new Promise((resolve, reject) => {
    // Options of this process, such as the loaders of a test runner, are not for the child.
    const child = fork(CHILD, {
      serialization: 'advanced',
      execArgv: [],
      timeout: 1000 * limitS,
      killSignal: 'SIGKILL',
    });
    child.once('message', resolve);
    child.once('error', reject);
    child.once('exit', (status, signal) => {
      reject(new Error(`the circuit simulator ended without an answer within ${limitS} s (${signal ?? status})`));
    });
    child.send(deck);
  });
}
