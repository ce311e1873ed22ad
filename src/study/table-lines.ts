import type { Problem } from './problem.js';

const LONGEST_TEXT = 20_000_000;
const MOST_ROWS = 200_000;
const MOST_COLUMNS = 100;
const NEEDS_SEMICOLONS = ' (decimal commas need semicolons between cells)';
/** More faults of one file than anyone reads. */
export const MOST_PROBLEMS = 20;

/** A cell with the place it stands at in its line. */
export interface Cell {
  readonly text: string;
  /** From 1. */
  readonly column: number;
}

/** A table as text: cells of the line of column names, and of every row with its line. */
export interface TableLines {
  readonly header: readonly Cell[];
  readonly rows: readonly { readonly line: number; readonly cells: readonly Cell[] }[];
  /** @returns the number that a cell holds in decimal notation, undefined if it holds none */
  readonly numberOf: (text: string) => number | undefined;
  /** @returns what may be amiss with a cell that holds none, for the end of a message; empty if nothing is known */
  readonly numberHint: (text: string) => string;
  /** @returns what is wrong with a row of so many cells */
  readonly raggedRow: (cells: number) => string;
}

/**
 * Splits a table into cells: at semicolons if the first line has any, else at commas. Line ends of any system, a byte
 * order mark, blank lines at the end and quoted cells are accepted.
 *
 * Between semicolons a number may have a decimal comma, but then every number has: next to `1,5` a `1.500` could be
 * either.
 *
 * @returns the cells, without any if the file is empty; or the problem of a table beyond all limits
 */
export function readTableLines(
  text: string,
  file: string,
): { readonly table: TableLines } | { readonly problems: Problem[] } {
  const beyond = (message: string) => ({ problems: [{ file, line: 1, column: 1, path: '', message }] });
  if (text.length > LONGEST_TEXT) {
    return beyond(`must be a table of at most ${LONGEST_TEXT} characters, got ${text.length}`);
  }
  const lines = linesOf(text);
  const first = lines[0] ?? '';
  const separator = first.includes(';') ? ';' : ',';
  const header = lines.length === 0 ? [] : cellsOf(first, separator);
  if (header.length > MOST_COLUMNS) return beyond(`must be at most ${MOST_COLUMNS} columns, got ${header.length}`);
  if (lines.length - 1 > MOST_ROWS) return beyond(`must be at most ${MOST_ROWS} rows, got ${lines.length - 1}`);
  const rows = lines.slice(1).map((line, index) => ({ line: index + 2, cells: cellsOf(line, separator) }));
  const hasCommas = separator === ';' && rows.some(({ cells }) => cells.some((cell) => DECIMAL_COMMA.test(cell.text)));
  return {
    table: {
      header,
      rows,
      numberOf: hasCommas ? (cell) => (cell.includes('.') ? undefined : numberOf(cell.replace(',', '.'))) : numberOf,
      numberHint: (cell) => {
        if (separator === ',') return DECIMAL_COMMA.test(cell) ? NEEDS_SEMICOLONS : '';
        return hasCommas && DECIMAL.test(cell) ? ' (other numbers of this table have a decimal comma)' : '';
      },
      raggedRow: (cells) => {
        const hint = separator === ',' && cells > header.length ? NEEDS_SEMICOLONS : '';
        return `must be a row of ${header.length} cells, got ${cells}${hint}`;
      },
    },
  };
}

/** The lines of a table without its byte order mark and blank lines at the end. */
function linesOf(text: string): readonly string[] {
  const lines = text.replace(/^\uFEFF/, '').split(/\r\n|\n|\r/);
  while (lines.length > 0 && lines.at(-1)?.trim() === '') lines.pop();
  return lines;
}

/** A cell in quotes, in which two of them stand for one, or anything up to the separator; then the separator or the end. */
const CELL = {
  ',': /(\s*)(?:"((?:[^"]|"")*)"\s*|([^,]*))(,|$)/y,
  ';': /(\s*)(?:"((?:[^"]|"")*)"\s*|([^;]*))(;|$)/y,
} as const;

/** The cells of a line, without quotes and the spaces around them. */
function cellsOf(line: string, separator: ',' | ';'): Cell[] {
  const cells: Cell[] = [];
  const pattern = CELL[separator];
  for (let from = 0; ; ) {
    pattern.lastIndex = from;
    const [whole = '', blanks = '', quoted, plain = '', end = ''] = pattern.exec(line) ?? [];
    cells.push({ text: (quoted?.replaceAll('""', '"') ?? plain).trim(), column: from + blanks.length + 1 });
    if (end === '') return cells;
    from += whole.length;
  }
}

const DECIMAL = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?$/;
const DECIMAL_COMMA = /^[+-]?\d*,\d+([eE][+-]?\d+)?$/;

function numberOf(text: string): number | undefined {
  if (!DECIMAL.test(text)) return undefined;
  const value = Number(text);
  return Number.isFinite(value) ? value : undefined;
}
