import { describe, expect, it } from 'vitest';
import { figureCell } from '../../src/output/figure-cell.js';
import { decimalsOf, type Figure, screenNumber } from '../../src/output/screen-number.js';

const figure = (estimate: number, lower: number, upper: number): Figure => ({ estimate, lower, upper, note: '' });
const none = (note: string): Figure => ({ estimate: null, lower: null, upper: null, note });

describe('figure in a table', () => {
  it('stands above its interval', () => {
    expect(figureCell(figure(46.09375, 41.82, 50.42), 1, 'share')).toEqual(['46.1', '41.8 to 50.4']);
    expect(figureCell(figure(-0.02, -0.06, 0.02), 2, 'amount')).toEqual(['-0.02', '-0.06 to 0.02']);
  });

  it('carries its sign as a difference, zero none', () => {
    expect(figureCell(figure(3.5, -1.7, 5.6), 1, 'difference')).toEqual(['+3.5', '-1.7 to +5.6']);
    expect(figureCell(figure(-0.01, -0.04, 0.04), 1, 'difference')).toEqual(['0.0', '0.0 to 0.0']);
  });

  it('does not look like none or all when it is neither', () => {
    expect(figureCell(figure(0.02, 0, 0.1), 1, 'share')[0]).toBe('<0.1');
    expect(figureCell(figure(99.98, 99.9, 100), 1, 'share')[0]).toBe('>99.9');
    expect(figureCell(figure(0, 0, 0.4), 1, 'share')[0]).toBe('0.0');
    expect(figureCell(figure(100, 99.6, 100), 1, 'share')[0]).toBe('100.0');
  });

  it('gives way to a dash and the reason', () => {
    expect(figureCell(none('not applicable: one BMS over the full series length'), 1, 'amount')).toEqual([
      '-',
      'one BMS',
    ]);
    expect(figureCell(none('not estimable from 10; over the 10 of 12'), 1, 'amount')).toEqual(['-', 'too few']);
    expect(figureCell(none('absent in every sampled bank'), 1, 'share')).toEqual(['-', 'absent']);
  });
});

describe('numbers on the screen', () => {
  it('show two digits of the widest interval of their column', () => {
    expect(decimalsOf([figure(46, 41.8, 50.4), figure(0.4, 0.1, 1.4)])).toBe(1);
    expect(decimalsOf([figure(2.4, 2.09, 2.66)])).toBe(2);
    expect(decimalsOf([figure(50, 20, 80)])).toBe(1);
    expect(decimalsOf([figure(1, 0.99999, 1.00001)])).toBe(4);
    expect(decimalsOf([none(''), figure(1, 1, 1)])).toBe(1);
  });

  it('stay narrow when they are large', () => {
    expect(screenNumber(999999.96, 1)).toBe('1000000.0');
    expect(screenNumber(123456789, 1)).toBe('1.23e+8');
    expect(screenNumber(-1e300, 4)).toBe('-1.00e+300');
  });
});
