import { nearestName } from './nearest-name.js';
import type { Problem } from './problem.js';
import { showValue } from './show-value.js';
import { type Cell, MOST_PROBLEMS, readTableLines } from './table-lines.js';

/** A column that a table must have, or may have if it is optional. */
export interface TableColumn {
  readonly name: string;
  readonly atLeast: number;
  readonly atMost: number;
  /** The table may do without it; then `columns` has none of its name. */
  readonly isOptional?: boolean;
  /** A cell may be empty, which counts as 0. */
  readonly emptyIsZero?: boolean;
}

/** Rows of numbers. */
export interface NumericTable {
  /** Column values in row order, by column name. */
  readonly columns: ReadonlyMap<string, readonly number[]>;
  /** @returns a problem at the cell of a row, from 0, in a column of the table */
  readonly problemAt: (row: number, name: string, message: string) => Problem;
}

/**
 * Reads a table of numbers under one line of column names, which may stand in any order.
 *
 * @returns the numbers, or a problem with line and column for everything that is no number within its column's bounds
 */
export function readNumericTable(
  text: string,
  file: string,
  wanted: readonly TableColumn[],
): { readonly table: NumericTable } | { readonly problems: Problem[] } {
  const problems: Problem[] = [];
  const fault = (line: number, column: number, path: string, message: string): void => {
    problems.push({ file, line, column, path, message });
  };
  const lines = readTableLines(text, file);
  if ('problems' in lines) return lines;
  const { header, rows, numberOf, numberHint, raggedRow } = lines.table;
  const names = wanted.flatMap(({ name, isOptional }) => (isOptional ? [] : [name])).join(',');
  if (header.length < 2) {
    const got = header[0] === undefined ? 'an empty file' : showValue(header[0].text);
    fault(1, 1, '', `must be a table that begins with the line ${names}, got ${got}`);
    return { problems };
  }
  const order = orderOf(header, wanted, fault);
  if (problems.length > 0) return { problems };
  if (rows.length === 0) fault(1, 1, '', 'must be a table with at least one row of numbers, got none');
  const columns = new Map(order.map(({ name }) => [name, [] as number[]]));
  for (const { line, cells } of rows) {
    if (problems.length >= MOST_PROBLEMS) break;
    if (cells.length !== header.length) {
      fault(line, 1, '', raggedRow(cells.length));
      continue;
    }
    for (const [place, column] of order.entries()) {
      const cell = cells[place];
      if (cell === undefined) continue;
      const value = column.emptyIsZero && cell.text === '' ? 0 : numberOf(cell.text);
      if (value === undefined || !(value >= column.atLeast && value <= column.atMost)) {
        const rule = `a number from ${column.atLeast} to ${column.atMost}`;
        const got = value === undefined ? `${showValue(cell.text)}${numberHint(cell.text)}` : value;
        fault(line, cell.column, column.name, `must be ${rule}, got ${got}`);
      } else columns.get(column.name)?.push(value);
    }
  }
  if (problems.length > 0) return { problems };
  const problemAt: NumericTable['problemAt'] = (row, name, message) => {
    const cell = rows[row]?.cells[order.findIndex((column) => column.name === name)];
    return { file, line: rows[row]?.line ?? 1, column: cell?.column ?? 1, path: name, message };
  };
  return { table: { columns, problemAt } };
}

/** The wanted columns in the order of the header. */
function orderOf(
  header: readonly Cell[],
  wanted: readonly TableColumn[],
  fault: (line: number, column: number, path: string, message: string) => void,
): readonly TableColumn[] {
  const names = wanted.map(({ name }) => name);
  const order: TableColumn[] = [];
  const meant = new Set<string>();
  for (const { text, column } of header) {
    const known = wanted.find(({ name }) => name === text);
    if (known !== undefined && !order.includes(known)) {
      order.push(known);
      continue;
    }
    const near = known === undefined ? nearestName(text, names) : undefined;
    if (near !== undefined) meant.add(near);
    const hint = near === undefined ? undefined : `did you mean ${near}?`;
    const rule = known === undefined ? `one of the columns ${names.join(', ')}` : 'a column that is given once';
    fault(1, column, text, `must be ${rule}, got ${showValue(text)}${hint === undefined ? '' : ` (${hint})`}`);
  }
  for (const { name, isOptional } of wanted) {
    const missing = !isOptional && !meant.has(name) && !order.some((column) => column.name === name);
    if (missing) fault(1, 1, name, `must be a column, got ${showValue(header.map(({ text }) => text).join(','))}`);
  }
  return order;
}
