import type { Bank } from '../../src/bank/bank.js';
import { outcomeColumns } from '../../src/outcomes/columns.js';
import { prepareCandidate, simulateInstance, simulateTwin } from '../../src/simulation/simulate-instance.js';
import { type CycleSample, type Trace, traceInstance } from '../../src/simulation/trace-instance.js';
import type { Study } from '../../src/study/study.js';
import { studyOf } from '../study/study-under-test.js';

/** What a candidate left: the outcomes of its twin and of every sampled bank, by column name. */
export interface CandidateRun {
  readonly twin: OutcomeValues;
  readonly banks: readonly OutcomeValues[];
}

/** @returns the value of a column; throws where there is no such column or it does not apply */
export type OutcomeValues = (column: string) => number;

/** Reads a study text and takes every candidate, its twin first, through all of its instances. */
export function runStudy(text: string): Readonly<Record<string, CandidateRun>> {
  const study = studyOf(text);
  return Object.fromEntries(study.candidates.map(({ key }) => [key, runCandidate(study, key)]));
}

function runCandidate(study: Study, key: string): CandidateRun {
  const prepared = prepareCandidate(study, key);
  const { strings, positions } = prepared.twin.bank;
  const columns = outcomeColumns({ strings, positions, checkpoints: prepared.checkpoints });
  const indexOf = new Map(columns.map(({ name }, index) => [name, index]));
  const byName =
    (values: readonly (number | null)[]): OutcomeValues =>
    (column) => {
      const value = values[indexOf.get(column) ?? -1];
      if (typeof value !== 'number') throw new RangeError(`${key} has no value of ${column}`);
      return value;
    };
  return {
    twin: byName(simulateTwin(prepared).values),
    banks: Array.from({ length: study.instances }, (_, i) => byName(simulateInstance(prepared, i + 1).values)),
  };
}

/** Traces one bank of a study text from its first cycle to its last. */
export function traceStudy(
  text: string,
  { candidate = 'strings', instance = 1, everyS = 3600 }: TracedBank = {},
): Trace {
  const study = studyOf(text);
  return traceInstance(study, { candidate, instance, fromCycle: 1, toCycle: study.cycles, everyS });
}

export interface TracedBank {
  readonly candidate?: string;
  readonly instance?: number;
  readonly everyS?: number;
}

/** Missing charge of every module of a sample, the largest of its cells, Ah. */
export function missingAh(bank: Bank, { modules }: CycleSample): readonly number[] {
  return modules.map(({ charge }, m) =>
    Math.max(...charge.map((z, k) => ((1 - z) * bank.capacityAs[bank.cellStart[m] + k]) / 3600)),
  );
}
