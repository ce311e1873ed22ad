import type { Problem } from './problem.js';
import { showValue } from './show-value.js';
import { type Cell, MOST_PROBLEMS, readTableLines } from './table-lines.js';

/** A table of named columns, its cells text until they are asked for. */
export interface TextTable {
  /** Column names in the order of the file. */
  readonly names: readonly string[];
  /** Lines and cells of the rows; a cell stands at the place of its name. */
  readonly rows: readonly { readonly line: number; readonly cells: readonly Cell[] }[];
  /** @returns a problem at a cell, or at the header where the row is null */
  readonly problemAt: (row: number | null, name: string, message: string) => Problem;
  /** @returns the values of a column as numbers within bounds, or the problem of every cell that is none */
  readonly numbers: (
    name: string,
    bounds: { readonly atLeast: number; readonly atMost: number },
  ) => { readonly values: readonly number[] } | { readonly problems: readonly Problem[] };
}

/** Reads a table of cells under one line of column names, whatever else its columns are called. */
export function readTextTable(
  text: string,
  file: string,
): { readonly table: TextTable } | { readonly problems: readonly Problem[] } {
  const lines = readTableLines(text, file);
  if ('problems' in lines) return lines;
  const { header, rows, numberOf, numberHint, raggedRow } = lines.table;
  const fault = (line: number, column: number, message: string): Problem => ({ file, line, column, path: '', message });
  if (header.length === 0) {
    return { problems: [fault(1, 1, 'must be a table that begins with a line of column names, got an empty file')] };
  }
  const names = header.map((cell) => cell.text);
  const twice = header.find(({ text: name }, place) => names.indexOf(name) !== place);
  if (twice !== undefined) {
    const message = `must be a column that is given once, got ${showValue(twice.text)}`;
    return { problems: [{ ...fault(1, twice.column, message), path: twice.text }] };
  }
  if (rows.length === 0) return { problems: [fault(1, 1, 'must be a table with at least one row, got none')] };
  const ragged = rows.filter(({ cells }) => cells.length !== header.length).slice(0, MOST_PROBLEMS);
  if (ragged.length > 0) {
    return {
      problems: ragged.map(({ line, cells }) => fault(line, 1, raggedRow(cells.length))),
    };
  }
  const problemAt = (row: number | null, name: string, message: string): Problem => {
    const place = names.indexOf(name);
    const cell = row === null ? header[place] : rows[row]?.cells[place];
    return { file, line: row === null ? 1 : (rows[row]?.line ?? null), column: cell?.column ?? 1, path: name, message };
  };
  const numbers: TextTable['numbers'] = (name, { atLeast, atMost }) => {
    const place = names.indexOf(name);
    const values: number[] = [];
    const problems: Problem[] = [];
    for (const [index, { cells }] of rows.entries()) {
      const written = cells[place]?.text ?? '';
      const value = numberOf(written);
      if (value !== undefined && value >= atLeast && value <= atMost) values.push(value);
      else if (problems.length < MOST_PROBLEMS) {
        const got = value === undefined ? `${showValue(written)}${numberHint(written)}` : value;
        const message = `must be a number from ${atLeast} to ${atMost}, got ${got}`;
        problems.push(problemAt(index, name, message));
      }
    }
    return problems.length > 0 ? { problems } : { values };
  };
  return { table: { names, rows, problemAt, numbers } };
}
