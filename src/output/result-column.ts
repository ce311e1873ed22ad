import { type CsvField, renderCsv } from './csv.js';

/** A column of a results file: what it is called, what it means and where its values come from. */
export interface ResultColumn<Row> {
  readonly name: string;
  readonly type: 'string' | 'integer' | 'number';
  readonly title: string;
  readonly description: string;
  /** UCUM code; null for text, and for amounts whose unit stands in the column `unit` of the same row. */
  readonly ucum: string | null;
  /** Never empty. */
  readonly required: boolean;
  readonly value: (row: Row) => CsvField;
}

/** A results file as text. */
export function renderColumns<Row>(columns: readonly ResultColumn<Row>[], rows: readonly Row[]): Promise<string> {
  return renderCsv(
    columns.map((column) => column.name),
    rows.map((row) => columns.map((column) => column.value(row))),
  );
}

/** Rows as objects with the names of the columns, for JSON. */
export function namedRows<Row>(
  columns: readonly ResultColumn<Row>[],
  rows: readonly Row[],
): readonly Readonly<Record<string, CsvField>>[] {
  return rows.map((row) => Object.fromEntries(columns.map((column) => [column.name, column.value(row)])));
}
