import { createHash } from 'node:crypto';
import { describe, expect, test } from 'vitest';
import { SOBOL_COLUMNS, sobolDigits } from '../../src/sampling/sobol.js';

const COLUMNS = Array.from({ length: SOBOL_COLUMNS }, (_, column) => column);
const places = (count: number): number[] => Array.from({ length: count }, (_, place) => place);

describe('points of Sobol', () => {
  test('are those published', () => {
    // Joe & Kuo 2008, SIAM J. Sci. Comput. 30, 2635: the first eight points of columns 1 to 3.
    expect([0, 1, 2].map((column) => places(8).map((place) => sobolDigits(column, place, 3) / 8))).toEqual([
      [0, 0.5, 0.75, 0.25, 0.375, 0.875, 0.625, 0.125],
      [0, 0.5, 0.25, 0.75, 0.375, 0.875, 0.125, 0.625],
      [0, 0.5, 0.25, 0.75, 0.625, 0.125, 0.875, 0.375],
    ]);
  });

  test('are those of a general statistics library in all columns up to the largest block', () => {
    // SciPy 1.17.1, scipy.stats.qmc.Sobol(32, scramble=False).random(4096), times 4096: the last point, and a digest of all.
    const points = places(4096).map((place) => COLUMNS.map((column) => sobolDigits(column, place, 12)));
    expect(points[4095]).toEqual([
      1, 3855, 1369, 3693, 3851, 323, 3889, 1601, 785, 1009, 2333, 1317, 1511, 2129, 2257, 1707, 255, 2495, 3331, 2135,
      925, 2999, 2777, 1825, 751, 2183, 1551, 117, 3827, 3503, 1481, 359,
    ]);
    const text = points.map((point) => point.join(',')).join('\n');
    expect(createHash('sha256').update(text).digest('hex')).toBe(
      '06b7638038e2d428fdaeb50953a0dc9f01e96021090b09864076314a0cbe81cd',
    );
  });

  test('have every value once in every column, whatever power of two of them is taken', () => {
    for (const digits of [0, 1, 5, 9]) {
      const count = 2 ** digits;
      for (const column of COLUMNS) {
        expect(new Set(places(count).map((place) => sobolDigits(column, place, digits))).size).toBe(count);
      }
    }
  });

  test('are refused in a column that there is not', () => {
    expect(() => sobolDigits(SOBOL_COLUMNS, 0, 5)).toThrow(RangeError);
    expect(() => sobolDigits(-1, 0, 5)).toThrow(RangeError);
  });
});
