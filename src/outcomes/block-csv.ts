import { measureNamed } from '../measures/registry.js';
import type { FailedInstance, InstanceRange } from './block.js';
import type { OutcomeColumn, OutcomeRow } from './columns.js';
import { OutcomeFault } from './outcome-fault.js';

const LINE_END = '\r\n';

/**
 * A block as CSV text (RFC 4180): a header, then one line per instance; empty where a measure does not apply, else the
 * shortest decimal that reads back as the same double. No field ever needs quotes.
 *
 * @param range instances of the block
 * @param rows in that order; taken one at a time, so that the row taken last is the one at fault
 * @param failed instances that have no row; may grow while rows are taken
 * @throws OutcomeFault if a row is missing or out of order, does not have one finite number or null per column, or an
 *   event is neither 0 nor 1
 */
export function encodeBlock(
  columns: readonly OutcomeColumn[],
  range: InstanceRange,
  rows: Iterable<OutcomeRow>,
  failed: readonly FailedInstance[] = [],
): string {
  const isEvent = columns.map(isEventColumn);
  const lines = [headerOf(columns)];
  let due = range.first;
  const passFailed = () => {
    while (failed.some(({ instance }) => instance === due)) due++;
  };
  for (const { instance, values } of rows) {
    passFailed();
    if (instance !== due) throw new OutcomeFault(`instance ${instance} where ${due} is due`);
    checkValues(columns, isEvent, values);
    lines.push([instance, ...values.map((value) => value ?? '')].join(','));
    due++;
  }
  passFailed();
  if (due !== range.last + 1) throw new OutcomeFault(`no row for instance ${due}`);
  return [...lines, ''].join(LINE_END);
}

/**
 * Reads a block back and checks everything about it that can be checked.
 *
 * @param range instances that the block must hold, in ascending order; rows beyond `last` are allowed and left out,
 *   because a block computed for a larger count serves a smaller one
 * @param failed instances that have no row
 * @throws OutcomeFault if it was not written by `encodeBlock` for these columns, or a row is missing or out of order
 */
export function decodeBlock(
  columns: readonly OutcomeColumn[],
  range: InstanceRange,
  csv: string,
  failed: readonly FailedInstance[] = [],
): OutcomeRow[] {
  const lines = csv.split(LINE_END);
  if (lines.pop() !== '') throw new OutcomeFault('last line has no line end');
  if (lines[0] !== headerOf(columns)) throw new OutcomeFault('header is not that of this study');
  const hasFailed = new Set(failed.map(({ instance }) => instance));
  const due = Array.from({ length: range.last - range.first + 1 }, (_, index) => range.first + index).filter(
    (instance) => !hasFailed.has(instance),
  );
  if (lines.length - 1 < due.length) throw new OutcomeFault(`${lines.length - 1} rows where ${due.length} are due`);
  const isEvent = columns.map(isEventColumn);
  return due.map((instance, index) => {
    const line = lines[index + 1] ?? '';
    const [first = '', ...fields] = line.split(',');
    if (first !== String(instance)) throw new OutcomeFault(`instance "${first}" where ${instance} is due`);
    try {
      const values = fields.map(readValue);
      checkValues(columns, isEvent, values);
      return { instance, values };
    } catch (error) {
      throw error instanceof OutcomeFault ? new OutcomeFault(`instance ${instance}: ${error.message}`) : error;
    }
  });
}

function checkValues(
  columns: readonly OutcomeColumn[],
  isEvent: readonly boolean[],
  values: OutcomeRow['values'],
): void {
  if (values.length !== columns.length) {
    throw new OutcomeFault(`${values.length} values for ${columns.length} columns`);
  }
  values.forEach((value, index) => {
    if (value === null) return;
    if (!Number.isFinite(value)) throw new OutcomeFault(`${columns[index]?.name} is ${value}`);
    if (isEvent[index] && value !== 0 && value !== 1) {
      throw new OutcomeFault(`event ${columns[index]?.name} is ${value}, neither 0 nor 1`);
    }
  });
}

function isEventColumn(column: OutcomeColumn): boolean {
  return column.role === 'measure' && measureNamed(column.name)?.kind === 'event';
}

function headerOf(columns: readonly OutcomeColumn[]): string {
  return ['instance', ...columns.map((column) => column.name)].join(',');
}

/** Strict inverse of the number's text: `Number` alone would take blanks, hexadecimals and longer spellings too. */
function readValue(field: string): number | null {
  if (field === '') return null;
  const value = Number(field);
  if (String(value) !== field) throw new OutcomeFault(`"${field}" is not a number as written by a run`);
  return value;
}
