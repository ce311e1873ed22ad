import type { Bank } from '../../src/bank/bank.js';
import type { OutcomeRow } from '../../src/measures/outcome-row.js';
import { outcomeColumns } from '../../src/outcomes/columns.js';
import { type PreparedCandidate, prepareCandidate, simulateInstance } from '../../src/simulation/simulate-instance.js';
import { type CycleSample, type Trace, traceInstance } from '../../src/simulation/trace-instance.js';
import type { Study } from '../../src/study/study.js';
import { studyOf } from '../study/study-under-test.js';

/** Value of a column of outcomes; throws where there is no such column or it does not apply. */
export type OutcomeValues = (column: string) => number;

/** What a candidate left: its sampled banks in the order of their numbers. */
export interface CandidateRun {
  readonly banks: readonly OutcomeValues[];
  /** A column over all banks. */
  readonly values: (column: string) => Float64Array;
}

/** Reads a study text and takes every candidate through all of its instances. */
export function runStudy(text: string): Readonly<Record<string, CandidateRun>> {
  const study = studyOf(text);
  return Object.fromEntries(study.candidates.map(({ key }) => [key, runCandidate(study, key)]));
}

function runCandidate(study: Study, key: string): CandidateRun {
  const prepared = prepareCandidate(study, key);
  const valuesOf = valuesByColumn(prepared);
  const banks = Array.from({ length: study.instances }, (_, i) => valuesOf(simulateInstance(prepared, i + 1)));
  return {
    banks,
    values: (column) => Float64Array.from(banks, (bank) => bank(column)),
  };
}

/** @returns what turns a row of the candidate into its values by column name */
export function valuesByColumn({
  candidate,
  checkpoints,
  twin,
}: PreparedCandidate): (row: OutcomeRow) => OutcomeValues {
  const { strings, positions } = twin.bank;
  const columns = outcomeColumns({ strings, positions, checkpoints });
  const indexOf = new Map(columns.map(({ name }, index) => [name, index]));
  return ({ values }) =>
    (column) => {
      const value = values[indexOf.get(column) ?? -1];
      if (typeof value !== 'number') throw new RangeError(`${candidate.key} has no value of ${column}`);
      return value;
    };
}

/** The bank of a study text to look at, and how often; by default the only one of candidate `strings`, hourly. */
export interface TracedBank {
  readonly candidate?: string;
  readonly instance?: number;
  readonly everyS?: number;
}

/** Replays one bank of a study text from its first cycle to its last. */
export function traceStudy(text: string, traced: TracedBank = {}): Trace {
  return traceBank(studyOf(text), traced);
}

/** As `traceStudy`, of a study that has been read. */
export function traceBank(
  study: Study,
  { candidate = 'strings', instance = 1, everyS = 3600 }: TracedBank = {},
): Trace {
  return traceInstance(study, { candidate, instance, fromCycle: 1, toCycle: study.cycles, everyS });
}

/** Missing charge Q (1 - z) of every module of a sample, the largest of its cells, Ah. */
export function missingAh(bank: Bank, { modules }: CycleSample): readonly number[] {
  return modules.map(({ charge }, m) =>
    Math.max(...charge.map((z, k) => ((1 - z) * bank.capacityAs[bank.cellStart[m] + k]) / 3600)),
  );
}

/** The last sample before `timeS`. */
export function sampleBefore({ samples }: Trace, timeS: number): CycleSample {
  const found = samples.findLast((sample) => sample.timeS < timeS);
  if (found === undefined) throw new RangeError(`no sample before ${timeS} s`);
  return found;
}
