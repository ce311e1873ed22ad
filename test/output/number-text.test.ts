import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { numberText } from '../../src/output/number-text.js';

describe('text of a number', () => {
  it.each([
    // By hand: rounded to seven significant digits, exact where fewer suffice.
    [46.09375, '46.09375'],
    [41.821139, '41.82114'],
    [10.742, '10.742'],
    [2 / 3, '0.6666667'],
    [0.1 + 0.2, '0.3'],
    [95, '95'],
    [-0, '0'],
    [-1.5, '-1.5'],
    [123456789, '123456789'],
    [12345678.9, '12345680'],
    [1e21, '1000000000000000000000'],
    [-2.5e22, '-25000000000000000000000'],
    [1.25e-7, '0.000000125'],
    [-4e-9, '-0.000000004'],
  ])('writes %d as %s', (value, text) => {
    expect(numberText(value)).toBe(text);
  });

  it('never needs an exponent and keeps seven digits of any number', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        const text = numberText(value);
        expect(text).toMatch(/^-?\d+(\.\d+)?$/);
        // Subnormal numbers have fewer digits than seven to keep.
        const tolerance = Math.max(Math.abs(value) * 5.0001e-7, Number.MIN_VALUE);
        expect(Math.abs(Number(text) - value)).toBeLessThanOrEqual(tolerance);
      }),
      { seed: 11, numRuns: 500 },
    );
  });

  it.each([Number.NaN, Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY])('refuses %d', (value) => {
    expect(() => numberText(value)).toThrow(RangeError);
  });
});
