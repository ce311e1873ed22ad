import type { SlowEvent } from './slow-event.js';
import type { SlowModuleSample, SlowRun } from './slow-run.js';

/** What is compared between two runs of one bank, sampled at the same instants. */
export interface Waveform {
  readonly timeS: readonly number[];
  readonly busV: readonly number[];
  readonly modules: readonly ModuleWaveform[];
}

/** One module over the samples, or one pack for native wiring. */
export interface ModuleWaveform {
  readonly string: number;
  readonly position: number;
  /** Cells in series. */
  readonly cells: number;
  readonly currentA: readonly number[];
  readonly terminalV: readonly number[];
  readonly lowestCharge: readonly number[];
  readonly highestCharge: readonly number[];
  readonly lowestCellV: readonly number[];
  readonly highestCellV: readonly number[];
  readonly chargeOpen: readonly boolean[];
  readonly dischargeOpen: readonly boolean[];
}

/** An event as far as comparing goes; strings and positions count from 1, null for the bank. */
export type ComparedEvent = Pick<SlowEvent, 'timeS' | 'kind' | 'string' | 'position'>;

/** The largest differences met, and a sentence for each kind of fault; empty `faults` means that the contract is kept. */
export interface WaveformComparison {
  readonly currentA: number;
  readonly charge: number;
  /** Cell voltage outside the windows around events, on the plateau and beyond the knees. */
  readonly plateauCellV: number;
  readonly kneeCellV: number;
  /** Bus and module terminals, per cell in series. */
  readonly terminalV: number;
  /** Samples whose cell voltages were compared. */
  readonly comparedSamples: number;
  readonly faults: readonly string[];
}

export interface EventComparison {
  readonly timeS: number;
  /** Largest share of the tolerance used. */
  readonly ofTolerance: number;
  readonly faults: readonly string[];
}

/** Limits of a waveform comparison. */
export interface WaveformLimits {
  readonly currentA: number;
  readonly charge: number;
  readonly plateauCellV: number;
  readonly kneeCellV: number;
  /** Bus and module terminals, per cell in series, on the plateau; `kneeCellV` holds where a cell is beyond a knee. */
  readonly terminalV: number;
}

const KNEE_BELOW = 0.02;
const KNEE_ABOVE = 0.99;
const AROUND_EVENT_S = 5;

/** The limits against outside waveforms: 1 % of the largest bank current, 0.001 of charge, 5 mV, 20 mV at the knees. */
export function contractLimits(largestBankA: number): WaveformLimits {
  return { currentA: 0.01 * largestBankA, charge: 0.001, plateauCellV: 0.005, kneeCellV: 0.02, terminalV: 0.005 };
}

/** Tolerance of an event's time: 1 s or 0.02 % of the time since the phase it lies in began. */
export function eventToleranceS(timeS: number, phaseStartS: readonly number[]): number {
  const began = phaseStartS.reduce((latest, startS) => (startS < timeS ? Math.max(latest, startS) : latest), 0);
  return Math.max(1, 2e-4 * (timeS - began));
}

/**
 * Compares two waveforms sample by sample.
 *
 * Currents are not compared within the time tolerance of an event, voltages not within that plus 5 s; the bus not
 * while every string is blocked. `expected` decides which cells are beyond a knee and which paths are open.
 */
export function compareWaveforms(
  actual: Waveform,
  expected: Waveform,
  limits: WaveformLimits,
  events: readonly ComparedEvent[],
  phaseStartS: readonly number[],
): WaveformComparison {
  const faults: string[] = [];
  const worst = { currentA: 0, charge: 0, plateauCellV: 0, kneeCellV: 0, terminalV: 0 };
  const note = (what: keyof typeof worst, difference: number, limit: number, where: string): void => {
    if (!(difference <= worst[what])) worst[what] = difference;
    if (!(difference <= limit)) faults.push(`${what} of ${where} differs by ${difference}, more than ${limit}`);
  };
  if (actual.timeS.length !== expected.timeS.length) faults.push('the waveforms differ in length');
  if (actual.modules.length !== expected.modules.length) faults.push('the waveforms differ in modules');
  let comparedSamples = 0;
  expected.timeS.forEach((timeS, i) => {
    if (!(Math.abs(actual.timeS[i] - timeS) < 1e-6))
      faults.push(`sample ${i} is at ${actual.timeS[i]}, not ${timeS} s`);
    const distance = (event: ComparedEvent): number =>
      Math.abs(event.timeS - timeS) - eventToleranceS(event.timeS, phaseStartS);
    const nearest = events.reduce((least, event) => Math.min(least, distance(event)), Number.POSITIVE_INFINITY);
    const compareVoltages = nearest > AROUND_EVENT_S;
    if (compareVoltages) comparedSamples++;
    expected.modules.forEach((module, m) => {
      const other = actual.modules[m];
      const where = `module ${module.string}.${module.position} at ${timeS} s`;
      if (nearest > 0) note('currentA', Math.abs(other.currentA[i] - module.currentA[i]), limits.currentA, where);
      const { lowestCharge, highestCharge } = module;
      note('charge', Math.abs(other.lowestCharge[i] - lowestCharge[i]), limits.charge, where);
      note('charge', Math.abs(other.highestCharge[i] - highestCharge[i]), limits.charge, where);
      if (!compareVoltages) return;
      const atKnee = lowestCharge[i] < KNEE_BELOW || highestCharge[i] > KNEE_ABOVE;
      const [what, limit] = atKnee
        ? (['kneeCellV', limits.kneeCellV] as const)
        : (['plateauCellV', limits.plateauCellV] as const);
      note(what, Math.abs(other.lowestCellV[i] - module.lowestCellV[i]), limit, where);
      note(what, Math.abs(other.highestCellV[i] - module.highestCellV[i]), limit, where);
    });
    if (!compareVoltages || everyStringBlocked(expected, i)) return;
    const beyondKnee = expected.modules.some((m) => m.lowestCharge[i] < KNEE_BELOW || m.highestCharge[i] > KNEE_ABOVE);
    const limit = beyondKnee ? Math.max(limits.kneeCellV, limits.terminalV) : limits.terminalV;
    expected.modules.forEach((module, m) => {
      const perCellV = Math.abs(actual.modules[m].terminalV[i] - module.terminalV[i]) / module.cells;
      note('terminalV', perCellV, limit, `module ${module.string}.${module.position} at ${timeS} s`);
    });
    const firstString = expected.modules.filter((module) => module.string === 1);
    const inSeries = firstString.reduce((sum, module) => sum + module.cells, 0);
    note('terminalV', Math.abs(actual.busV[i] - expected.busV[i]) / inSeries, limit, `the bus at ${timeS} s`);
  });
  return { ...worst, comparedSamples, faults };
}

/** A waveform without its first samples. */
export function laterSamples(waveform: Waveform, first: number): Waveform {
  const { timeS, busV, modules } = waveform;
  return {
    timeS: timeS.slice(first),
    busV: busV.slice(first),
    modules: modules.map((module) => ({
      ...module,
      currentA: module.currentA.slice(first),
      terminalV: module.terminalV.slice(first),
      lowestCharge: module.lowestCharge.slice(first),
      highestCharge: module.highestCharge.slice(first),
      lowestCellV: module.lowestCellV.slice(first),
      highestCellV: module.highestCellV.slice(first),
      chargeOpen: module.chargeOpen.slice(first),
      dischargeOpen: module.dischargeOpen.slice(first),
    })),
  };
}

/** A string is blocked when it can carry no current out and none flows in. */
function everyStringBlocked(waveform: Waveform, i: number): boolean {
  const strings = new Set(waveform.modules.map((module) => module.string));
  return [...strings].every((string) =>
    waveform.modules.some(
      (module) =>
        module.string === string &&
        (module.dischargeOpen[i] || module.chargeOpen[i]) &&
        Math.abs(module.currentA[i]) < 1e-3,
    ),
  );
}

/**
 * Matches events by module, kind and order. An event of one run without a partner in the other is a fault, as is a
 * partner further away than the tolerance of its time.
 */
export function compareEvents(
  actual: readonly ComparedEvent[],
  expected: readonly ComparedEvent[],
  phaseStartS: readonly number[],
  toleranceS: (timeS: number, phaseStartS: readonly number[]) => number = eventToleranceS,
): EventComparison {
  const faults: string[] = [];
  let worstS = 0;
  let ofTolerance = 0;
  const keyOf = (event: ComparedEvent): string => `${event.kind} of ${event.string ?? 'bank'}.${event.position ?? '-'}`;
  for (const key of new Set([...expected, ...actual].map(keyOf))) {
    const mine = actual.filter((event) => keyOf(event) === key);
    const theirs = expected.filter((event) => keyOf(event) === key);
    if (mine.length !== theirs.length) {
      faults.push(`${key}: ${mine.length} events, expected ${theirs.length}`);
    }
    theirs.slice(0, mine.length).forEach((event, i) => {
      const difference = Math.abs(mine[i].timeS - event.timeS);
      const tolerance = toleranceS(event.timeS, phaseStartS);
      worstS = Math.max(worstS, difference);
      ofTolerance = Math.max(ofTolerance, difference / tolerance);
      if (!(difference <= tolerance)) faults.push(`${key}: at ${mine[i].timeS} s, expected ${event.timeS} s`);
    });
  }
  return { timeS: worstS, ofTolerance, faults };
}

/**
 * Largest difference of charge fraction over all cells, cycle by cycle.
 *
 * @throws RangeError if the runs differ in cycles or cells
 */
export function chargeDifference(
  actual: readonly (readonly number[])[],
  expected: readonly (readonly number[])[],
): number[] {
  if (actual.length !== expected.length) throw new RangeError('the runs differ in cycles');
  return expected.map((cells, cycle) => {
    if (actual[cycle].length !== cells.length) throw new RangeError('the runs differ in cells');
    return Math.max(...cells.map((z, c) => Math.abs(actual[cycle][c] - z)));
  });
}

/** The waveform of a slow run. */
export function waveformOf(run: SlowRun): Waveform {
  const { samples } = run;
  return {
    timeS: samples.map((sample) => sample.timeS),
    busV: samples.map((sample) => sample.busV),
    modules: samples[0].modules.map(({ string, position }, m) => {
      const over = <T>(of: (module: SlowModuleSample) => T): T[] => samples.map((sample) => of(sample.modules[m]));
      return {
        string,
        position,
        cells: samples[0].modules[m].cellV.length,
        currentA: over((module) => module.currentA),
        terminalV: over((module) => module.terminalV),
        lowestCharge: over((module) => Math.min(...module.chargeFraction)),
        highestCharge: over((module) => Math.max(...module.chargeFraction)),
        lowestCellV: over((module) => Math.min(...module.cellV)),
        highestCellV: over((module) => Math.max(...module.cellV)),
        chargeOpen: over((module) => module.chargeOpen),
        dischargeOpen: over((module) => module.dischargeOpen),
      };
    }),
  };
}
