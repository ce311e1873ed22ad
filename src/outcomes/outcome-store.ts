import type { ColumnValues } from './column-values.js';
import type { OutcomeColumn, OutcomeRow } from './columns.js';

/**
 * Outcomes of a run as whoever summarises them sees them: one column at a time, so that memory does not grow with the
 * number of columns. Instances 1 to `instances` are there for every candidate.
 */
export interface OutcomeStore {
  readonly instances: number;
  /** @throws RangeError if there is no such candidate */
  columns(candidate: string): readonly OutcomeColumn[];
  /** @throws RangeError if there is no such candidate or column */
  column(candidate: string, name: string): Promise<ColumnValues>;
  /** The row of the candidate's twin, values in the order of `columns(candidate)`. */
  twin(candidate: string): Promise<OutcomeRow>;
}

/**
 * Place of a column among a candidate's columns.
 *
 * @throws RangeError if there is none of that name
 */
export function columnIndex(columns: readonly OutcomeColumn[], name: string): number {
  const index = columns.findIndex((column) => column.name === name);
  if (index < 0) throw new RangeError(`outcomes have no column "${name}"`);
  return index;
}
