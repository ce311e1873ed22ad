import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { asciiText, wrapText } from '../../src/output/plain-text.js';

describe('text for the screen', () => {
  it.each([
    ['Hütte am See', 'Hutte am See'],
    ['24 V \u2013 cabin', '24 V ? cabin'],
    ['red \u001b[31malert\u001b[0m', 'red [31malert[0m'],
    ['one\r\ntwo\tthree', 'one two three'],
    ['bell\u0007, back\u0008, delete\u007f, next line\u0085', 'bell, back, delete, next line'],
    ['turned \u202eround\u202c', 'turned round'],
    ['half \ud83d', 'half'],
  ])('shows %j as %j', (text, shown) => {
    expect(asciiText(text)).toBe(shown);
  });

  it('is printable ASCII whatever comes in', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), (text) => {
        expect(asciiText(text)).toMatch(/^[ -~]*$/);
      }),
      { seed: 5 },
    );
  });
});

describe('wrapped text', () => {
  it('breaks at blanks and indents', () => {
    expect(wrapText('aa bb cc dd', 6)).toEqual(['aa bb', 'cc dd']);
    expect(wrapText('aa bb cc', 6, { first: ' ', others: '  ' })).toEqual([' aa', '  bb', '  cc']);
    expect(wrapText('aa bb cc', 7, { first: ' ', others: '  ' })).toEqual([' aa bb', '  cc']);
  });

  it('cuts a word that is longer than a line', () => {
    expect(wrapText('abcdefgh ij', 3)).toEqual(['abc', 'def', 'gh', 'ij']);
  });

  it('never exceeds the width and loses no character but blanks', () => {
    fc.assert(
      fc.property(fc.array(fc.stringMatching(/^[a-z]{1,30}$/)), fc.integer({ min: 4, max: 40 }), (words, width) => {
        const lines = wrapText(words.join(' '), width, { first: '', others: '  ' });
        for (const line of lines) expect(line.length).toBeLessThanOrEqual(width);
        expect(lines.join('').replaceAll(' ', '')).toBe(words.join(''));
      }),
      { seed: 6 },
    );
  });
});
