import type { ComparedEvent, ModuleWaveform, Waveform } from '../contract.js';
import type { CircuitRun } from './run-deck.js';

/** Gives the value of a vector, by its name, at one instant. */
type ValueOf = (vector: string) => number;
type Reading = (value: ValueOf) => number;

/** How one module is read from the vectors of a deck. */
export interface CircuitModule {
  readonly string: number;
  readonly position: number;
  /** Cells in series. */
  readonly cells: number;
  readonly currentA: Reading;
  readonly terminalV: Reading;
  readonly charge: readonly Reading[];
  /** Of all cells, or of those that may be the extreme ones. */
  readonly cellV: readonly Reading[];
  /** 1 while the path is closed, 0 while it is open. */
  readonly chargeClosed: Reading;
  readonly dischargeClosed: Reading;
}

/** How a bank is read from the vectors of a deck. */
export interface CircuitBank {
  readonly busV: Reading;
  readonly modules: readonly CircuitModule[];
}

/** The waveform of a circuit at the given instants, linear between those that the simulator took. */
export function circuitWaveform(run: CircuitRun, bank: CircuitBank, timeS: readonly number[]): Waveform {
  const instants = timeS.map((t) => valuesAt(run, t));
  const over = (of: Reading): number[] => instants.map(of);
  return {
    timeS,
    busV: over(bank.busV),
    modules: bank.modules.map((module): ModuleWaveform => {
      const least = (of: readonly Reading[]): number[] => over((v) => Math.min(...of.map((reading) => reading(v))));
      const most = (of: readonly Reading[]): number[] => over((v) => Math.max(...of.map((reading) => reading(v))));
      return {
        string: module.string,
        position: module.position,
        cells: module.cells,
        currentA: over(module.currentA),
        terminalV: over(module.terminalV),
        lowestCharge: least(module.charge),
        highestCharge: most(module.charge),
        lowestCellV: least(module.cellV),
        highestCellV: most(module.cellV),
        chargeOpen: over(module.chargeClosed).map((closed) => closed < 0.5),
        dischargeOpen: over(module.dischargeClosed).map((closed) => closed < 0.5),
      };
    }),
  };
}

/** When paths of a circuit open and close, module by module. */
export function circuitEvents(run: CircuitRun, bank: CircuitBank): ComparedEvent[] {
  return bank.modules.flatMap(({ string, position, chargeClosed, dischargeClosed }) =>
    (
      [
        ['over-voltage', chargeClosed],
        ['under-voltage', dischargeClosed],
      ] as const
    ).flatMap(([what, closed]) =>
      crossingsOf(run, closed).map(
        ({ timeS, rises }): ComparedEvent => ({
          timeS,
          kind: `${what}-${rises ? 'release' : 'trip'}`,
          string,
          position,
        }),
      ),
    ),
  );
}

/** Where a reading passes one half. */
function crossingsOf(run: CircuitRun, of: Reading): { timeS: number; rises: boolean }[] {
  const { timeS } = run;
  const above = Array.from(timeS, (_, i) => of(valuesAtPoint(run, i)) - 0.5);
  return above.flatMap((to, i) => {
    const from = above[i - 1] ?? to;
    if (from < 0 === to < 0) return [];
    const share = from / (from - to);
    return [{ timeS: timeS[i - 1] + share * (timeS[i] - timeS[i - 1]), rises: to >= 0 }];
  });
}

function valuesAtPoint(run: CircuitRun, i: number): ValueOf {
  return (vector) => vectorOf(run, vector)[i];
}

function valuesAt(run: CircuitRun, t: number): ValueOf {
  const after = Math.max(1, firstAtOrAfter(run.timeS, t));
  const share = (t - run.timeS[after - 1]) / (run.timeS[after] - run.timeS[after - 1]);
  return (vector) => {
    const values = vectorOf(run, vector);
    return values[after - 1] + share * (values[after] - values[after - 1]);
  };
}

function vectorOf(run: CircuitRun, vector: string): Float64Array {
  const values = run.vectors.get(vector);
  if (values === undefined) throw new RangeError(`the circuit run has no vector ${vector}`);
  return values;
}

/** Index of the first of ascending instants that is `t` or later; the last if none is. */
function firstAtOrAfter(ascending: Float64Array, t: number): number {
  let [low, high] = [0, ascending.length - 1];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (ascending[middle] < t) low = middle + 1;
    else high = middle;
  }
  return low;
}
