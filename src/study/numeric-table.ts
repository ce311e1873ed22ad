import { nearestName } from './nearest-name.js';
import type { Problem } from './problem.js';
import { showValue } from './show-value.js';

const LONGEST_TEXT = 20_000_000;
export const MOST_ROWS = 200_000;
/** More faults of one table than anyone reads. */
export const MOST_PROBLEMS = 20;

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

/** Rows of numbers with the line each stands in. */
export interface NumericTable {
  /** Column values in row order, by column name. */
  readonly columns: ReadonlyMap<string, readonly number[]>;
  /** Line of each row, from 1. */
  readonly lines: readonly number[];
}

/** A cell with the place it stands at in its line. */
export interface Cell {
  readonly text: string;
  /** From 1. */
  readonly column: number;
}

/**
 * Reads comma-separated numbers under one line of column names.
 *
 * Columns may stand in any order; line ends of any system, a byte order mark, blank lines at the end and quoted cells
 * are accepted. Anything else that is no number within the column's bounds is a problem with its line and column.
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
  if (text.length > LONGEST_TEXT) {
    fault(1, 1, '', `must be a table of at most ${LONGEST_TEXT} characters, got ${text.length}`);
    return { problems };
  }
  const lines = linesOf(text);
  const names = wanted.flatMap(({ name, isOptional }) => (isOptional ? [] : [name])).join(',');
  if (lines.length === 0 || !(lines[0] ?? '').includes(',')) {
    const got = lines.length === 0 ? 'an empty file' : showValue(lines[0]);
    fault(1, 1, '', `must be a table that begins with the line ${names}, got ${got}`);
    return { problems };
  }
  const header = cellsOf(lines[0] ?? '');
  const order = orderOf(header, wanted, fault);
  if (problems.length > 0) return { problems };
  if (lines.length < 2) fault(1, 1, '', 'must be a table with at least one row of numbers, got none');
  if (lines.length - 1 > MOST_ROWS) fault(1, 1, '', `must be at most ${MOST_ROWS} rows, got ${lines.length - 1}`);
  const columns = new Map(order.map(({ name }) => [name, [] as number[]]));
  const rowLines: number[] = [];
  for (let index = 1; index < lines.length && problems.length < MOST_PROBLEMS; index++) {
    const cells = cellsOf(lines[index] ?? '');
    const line = index + 1;
    if (cells.length !== header.length) {
      fault(line, 1, '', `must be a row of ${header.length} cells, got ${cells.length}`);
      continue;
    }
    for (const [place, column] of order.entries()) {
      const cell = cells[place];
      if (cell === undefined) continue;
      const value = column.emptyIsZero && cell.text === '' ? 0 : numberOf(cell.text);
      if (value === undefined || !(value >= column.atLeast && value <= column.atMost)) {
        const rule = `a number from ${column.atLeast} to ${column.atMost}`;
        fault(line, cell.column, column.name, `must be ${rule}, got ${showValue(value ?? cell.text)}`);
      } else columns.get(column.name)?.push(value);
    }
    rowLines.push(line);
  }
  return problems.length > 0 ? { problems } : { table: { columns, lines: rowLines } };
}

/** @returns the lines of a table without its byte order mark and blank lines at the end */
export function linesOf(text: string): readonly string[] {
  const lines = text.replace(/^\uFEFF/, '').split(/\r\n|\n|\r/);
  while (lines.length > 0 && lines.at(-1)?.trim() === '') lines.pop();
  return lines;
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
    const near = nearestName(text, names);
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

/** @returns the cells of a line, without quotes and the spaces around them */
export function cellsOf(line: string): Cell[] {
  let column = 1;
  return line.split(',').map((raw) => {
    const text = raw.trim();
    const cell = { text: /^".*"$/.test(text) ? text.slice(1, -1).trim() : text, column: column + raw.search(/\S|$/) };
    column += raw.length + 1;
    return cell;
  });
}

const DECIMAL = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?$/;

/** @returns the number that a cell holds in decimal notation, undefined if it holds none */
export function numberOf(text: string): number | undefined {
  if (!DECIMAL.test(text)) return undefined;
  const value = Number(text);
  return Number.isFinite(value) ? value : undefined;
}
