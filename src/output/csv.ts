import { writeToString } from 'fast-csv';
import { numberText } from './number-text.js';

/** A field of a CSV file; null is an empty field. */
export type CsvField = string | number | null;

/**
 * A CSV file per RFC 4180: a head, CRLF after every line, quotes where a field needs them. Numbers are plain decimals;
 * text that a spreadsheet would run as a formula is made harmless.
 *
 * @param rows as many fields each as there are columns
 * @throws RangeError if a number is not finite
 */
export async function renderCsv(head: readonly string[], rows: readonly (readonly CsvField[])[]): Promise<string> {
  const lines = [head, ...rows].map((fields) => fields.map(fieldText));
  return writeToString(lines, { rowDelimiter: '\r\n', includeEndRowDelimiter: true });
}

function fieldText(field: CsvField): string {
  if (field === null) return '';
  return typeof field === 'number' ? numberText(field) : inertText(field);
}

/**
 * Text that no spreadsheet takes for a formula: a quote is put before the characters that can begin one.
 *
 * @see OWASP, "CSV Injection": = + - @ tab, carriage return, line feed
 */
export function inertText(text: string): string {
  return /^[=+\-@\t\r\n]/.test(text) ? `'${text}` : text;
}
