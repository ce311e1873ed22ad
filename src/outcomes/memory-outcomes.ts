import { ColumnValues } from './column-values.js';
import type { OutcomeColumn, OutcomeRow } from './columns.js';
import { columnIndex, type OutcomeStore } from './outcome-store.js';

/** Outcomes of one candidate held in memory. */
export interface CandidateOutcomes {
  readonly columns: readonly OutcomeColumn[];
  /** Instances from 1, ascending, without gaps. */
  readonly rows: readonly OutcomeRow[];
  readonly twin: OutcomeRow;
}

/** Outcomes kept in memory: for small studies, for tests and for whoever uses the engine as a library. */
export class MemoryOutcomes implements OutcomeStore {
  readonly #candidates: ReadonlyMap<string, CandidateOutcomes>;
  readonly instances: number;

  /** @throws RangeError if candidates differ in their number of rows or a row is out of place */
  constructor(candidates: ReadonlyMap<string, CandidateOutcomes>) {
    this.#candidates = candidates;
    const counts = new Set([...candidates.values()].map(({ rows }) => rows.length));
    if (counts.size > 1) throw new RangeError(`candidates have ${[...counts].join(' and ')} instances`);
    for (const [key, { rows }] of candidates) {
      const misplaced = rows.findIndex((row, index) => row.instance !== index + 1);
      if (misplaced >= 0) throw new RangeError(`${key}: instance ${misplaced + 1} is out of place`);
    }
    this.instances = [...counts][0] ?? 0;
  }

  columns(candidate: string): readonly OutcomeColumn[] {
    return this.#outcomes(candidate).columns;
  }

  async column(candidate: string, name: string): Promise<ColumnValues> {
    const { columns, rows } = this.#outcomes(candidate);
    const index = columnIndex(columns, name);
    return new ColumnValues(Float64Array.from(rows, (row) => row.values[index] ?? Number.NaN));
  }

  async twin(candidate: string): Promise<OutcomeRow> {
    return this.#outcomes(candidate).twin;
  }

  #outcomes(candidate: string): CandidateOutcomes {
    const outcomes = this.#candidates.get(candidate);
    if (outcomes === undefined) throw new RangeError(`no candidate "${candidate}" in these outcomes`);
    return outcomes;
  }
}
