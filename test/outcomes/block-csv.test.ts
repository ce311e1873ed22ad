import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { decodeBlock, encodeBlock } from '../../src/outcomes/block-csv.js';
import { type OutcomeColumn, type OutcomeRow, outcomeColumns } from '../../src/outcomes/columns.js';
import { OutcomeFault } from '../../src/outcomes/outcome-fault.js';

const COLUMNS: readonly OutcomeColumn[] = outcomeColumns({ strings: 1, positions: 1, checkpoints: [] }).filter(
  ({ name }) => ['load_factor', 'early_cutoff_on_charge', 'lost_capacity'].includes(name),
);

const TWO_ROWS: readonly OutcomeRow[] = [
  { instance: 1, values: [1.05, 1, 0.1] },
  { instance: 2, values: [0.95, 0, null] },
];
// By hand from RFC 4180 section 2: a header line, commas, CRLF after every record; null is an empty field.
const TWO_ROWS_CSV = 'instance,load_factor,early_cutoff_on_charge,lost_capacity\r\n1,1.05,1,0.1\r\n2,0.95,0,\r\n';
const ONE = { first: 1, last: 1 };
const BOTH = { first: 1, last: 2 };

describe('a block of outcomes', () => {
  it('is CSV with a header, CRLF line ends and empty fields for what does not apply', () => {
    expect(encodeBlock(COLUMNS, BOTH, TWO_ROWS)).toBe(TWO_ROWS_CSV);
  });

  it('reads back as it was', () => {
    expect(decodeBlock(COLUMNS, BOTH, TWO_ROWS_CSV)).toEqual(TWO_ROWS);
  });

  it('keeps every finite double to the last bit', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        const rows = [{ instance: 1, values: [value, 0, null] }];
        const [row] = decodeBlock(COLUMNS, ONE, encodeBlock(COLUMNS, ONE, rows));
        // -0 is written as 0: a report must not show a sign that means nothing.
        expect(row?.values[0]).toBe(value === 0 ? 0 : value);
      }),
      { seed: 6, numRuns: 500 },
    );
  });

  it('serves a run of fewer instances by leaving out the rows beyond', () => {
    expect(decodeBlock(COLUMNS, ONE, TWO_ROWS_CSV)).toEqual([TWO_ROWS[0]]);
  });

  const refused: readonly (readonly [string, string, RegExp])[] = [
    ['of other columns', TWO_ROWS_CSV.replace('load_factor', 'load'), /header/],
    ['cut off in the last line', TWO_ROWS_CSV.slice(0, -2), /last line/],
    ['that lacks a row', TWO_ROWS_CSV.replace('2,0.95,0,\r\n', ''), /1 rows where 2 are due/],
    ['with rows in another order', TWO_ROWS_CSV.replace('\r\n1,', '\r\n2,'), /instance "2" where 1 is due/],
    ['with a field too few', TWO_ROWS_CSV.replace('0.1', '0.1,7'), /4 values for 3 columns/],
    ['with text for a number', TWO_ROWS_CSV.replace('0.1', 'none'), /"none" is not a number/],
    ['with a hexadecimal number', TWO_ROWS_CSV.replace('0.1', '0x1'), /"0x1" is not a number/],
    ['with a blank', TWO_ROWS_CSV.replace('0.1', ' '), /" " is not a number/],
    ['with a number that is not finite', TWO_ROWS_CSV.replace('0.1', 'Infinity'), /lost_capacity is Infinity/],
    ['with half an event', TWO_ROWS_CSV.replace(',1,', ',0.5,'), /early_cutoff_on_charge is 0.5/],
  ];
  it.each(refused)('is refused if it is one %s', (_, csv, message) => {
    expect(() => decodeBlock(COLUMNS, BOTH, csv)).toThrow(OutcomeFault);
    expect(() => decodeBlock(COLUMNS, BOTH, csv)).toThrow(message);
  });

  it.each([Number.NaN, Number.POSITIVE_INFINITY])('cannot be written with %s', (value) => {
    const rows = [{ instance: 1, values: [1, 0, value] }];
    expect(() => encodeBlock(COLUMNS, ONE, rows)).toThrow(`lost_capacity is ${value}`);
  });

  it('cannot be written with rows missing or out of order', () => {
    expect(() => encodeBlock(COLUMNS, BOTH, TWO_ROWS.slice(0, 1))).toThrow('no row for instance 2');
    expect(() => encodeBlock(COLUMNS, BOTH, TWO_ROWS.toReversed())).toThrow('instance 2 where 1 is due');
  });

  it('tells the address of a wrong value that it reads', () => {
    const csv = TWO_ROWS_CSV.replace('0.95', 'NaN');
    expect(() => decodeBlock(COLUMNS, BOTH, csv)).toThrow('instance 2: load_factor is NaN');
  });
});
