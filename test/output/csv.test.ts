import { describe, expect, it } from 'vitest';
import { type CsvField, inertText, renderCsv } from '../../src/output/csv.js';
import { parsedCsv } from './parsed-csv.js';

describe('CSV', () => {
  it('is written as RFC 4180 wants it', async () => {
    const rows: CsvField[][] = [
      ['plain', 1.5, null],
      ['with, comma', -2, 'with "quotes"'],
    ];
    expect(await renderCsv(['a', 'b', 'c'], rows)).toBe(
      'a,b,c\r\nplain,1.5,\r\n"with, comma",-2,"with ""quotes"""\r\n',
    );
  });

  it('has a head even without rows', async () => {
    expect(await renderCsv(['a', 'b'], [])).toBe('a,b\r\n');
  });

  it('is read back as it was, line breaks and quotes included', async () => {
    const texts = ['two\r\nlines', 'two\nlines', 'carriage\rreturn', '"', ',', ' blanks ', 'ümlaut', '', "'"];
    const text = await renderCsv(['text'], [...texts.map((one) => [one, 'end'])]);
    expect((await parsedCsv(text.replace('text\r\n', ''))).map(([first]) => first)).toEqual(texts);
  });

  it.each(['=1+1', '+1', '-1', '@SUM(A1)', '\t=1', '\r=1', '\n=1'])('makes the text %j harmless', async (text) => {
    // OWASP, CSV injection: these first characters begin a formula.
    expect(inertText(text)).toBe(`'${text}`);
    const [, row] = await parsedCsv(await renderCsv(['a', 'b'], [[text, 'end']]));
    expect(row[0]).toBe(`'${text}`);
  });

  it('leaves numbers their sign and other text as it is', async () => {
    expect(await renderCsv(['a', 'b'], [[-1, 'a=1']])).toBe('a,b\r\n-1,a=1\r\n');
  });

  it('refuses a number that is not finite', async () => {
    await expect(renderCsv(['a'], [[Number.NaN]])).rejects.toThrow(RangeError);
  });
});
