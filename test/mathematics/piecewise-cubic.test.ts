import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  linearCurve,
  monotoneCurve,
  type PiecewiseCubic,
  valueOfCurve,
} from '../../src/mathematics/piecewise-cubic.js';

const X = [0, 1, 3, 4];
const Y = [0, 1, 2, 4];

/** Tables of 2 to 12 points that rise, with steps spread over five decades. */
const risingTable = fc
  .array(
    fc.record({
      width: fc.double({ min: -4, max: 1, noNaN: true }).map((exponent) => 10 ** exponent),
      rise: fc.double({ min: -4, max: 1, noNaN: true }).map((exponent) => 10 ** exponent),
    }),
    { minLength: 1, maxLength: 11 },
  )
  .map((steps) => {
    const x = [0];
    const y = [2];
    for (const { width, rise } of steps) {
      x.push(x[x.length - 1] + width);
      y.push(y[y.length - 1] + rise);
    }
    return { x, y };
  });

describe('monotoneCurve', () => {
  // Slopes of X, Y by hand; lines 1, 1/2, 2 over widths 1, 2, 1:
  // d1 = 9 / (5 / 1 + 4 / (1/2)) = 9/13, d2 = 9 / (4 / (1/2) + 5 / 2) = 6/7,
  // d0 = (4 x 1 - 1 x 1/2) / 3 = 7/6, d3 = (4 x 2 - 1 x 1/2) / 3 = 5/2.
  // Middle of a piece: (y0 + y1) / 2 + h (d0 - d1) / 8.
  it.each([
    [0, 0],
    [0.5, 0.5 + (7 / 6 - 9 / 13) / 8],
    [1, 1],
    [2, 1.5 + (2 * (9 / 13 - 6 / 7)) / 8],
    [3, 2],
    [3.5, 3 + (6 / 7 - 5 / 2) / 8],
    [4, 4],
    [-1, -7 / 6],
    [6, 4 + 2 * (5 / 2)],
  ])('goes through what was worked out by hand at %d', (x, y) => {
    expect(valueOfCurve(monotoneCurve(X, Y, null, null), x)).toBeCloseTo(y, 14);
  });

  it('goes on beyond its ends with the slopes given', () => {
    const curve = monotoneCurve(X, Y, 30, 40);
    expect(valueOfCurve(curve, -0.1)).toBeCloseTo(-3, 12);
    expect(valueOfCurve(curve, 4.1)).toBeCloseTo(8, 12);
  });

  it('limits the slope at an end to what keeps the shape', () => {
    // By hand: three-point slope (3 x 1 - 10) / 2 < 0 becomes 0; (3 x 1 + 10) / 2 > 3 with a turn becomes 3.
    const flat = monotoneCurve([0, 1, 2], [0, 1, 11], null, null);
    expect(valueOfCurve(flat, -1)).toBe(0);
    const turning = monotoneCurve([0, 1, 2], [0, 1, -9], null, null);
    expect(valueOfCurve(turning, -1)).toBeCloseTo(-3, 14);
  });

  it('is level at a point where the table turns', () => {
    const curve = monotoneCurve([0, 1, 2, 3], [0, 2, 1, 4], null, null);
    expect(valueOfCurve(curve, 1 + 1e-6)).toBeCloseTo(2, 10);
    expect(valueOfCurve(curve, 1 - 1e-6)).toBeCloseTo(2, 10);
  });

  it('never leaves the range of a piece and never falls where the table rises', () => {
    fc.assert(
      fc.property(risingTable, ({ x, y }) => {
        const curve = monotoneCurve(x, y, null, null);
        for (let i = 0; i + 1 < x.length; i++) {
          let before = y[i];
          for (let part = 0; part <= 16; part++) {
            const value = valueOfCurve(curve, x[i] + ((x[i + 1] - x[i]) * part) / 16);
            expect(value).toBeGreaterThanOrEqual(before - 1e-13);
            expect(value).toBeLessThanOrEqual(y[i + 1] + 1e-13);
            before = value;
          }
        }
      }),
      { seed: 31, numRuns: 200 },
    );
  });

  it('has one slope on both sides of every point, ends included', () => {
    fc.assert(
      fc.property(risingTable, ({ x, y }) => {
        const curve = monotoneCurve(x, y, null, null);
        for (let i = 0; i < x.length; i++) {
          const [before, after] = slopesAt(curve, i, x);
          expect(Math.abs(after - before)).toBeLessThan(1e-9 * (1 + Math.abs(after)));
        }
      }),
      { seed: 32, numRuns: 200 },
    );
  });
});

/** Slopes at point i of the piece that ends there and of the piece that begins there, from the coefficients. */
function slopesAt({ coefficients }: PiecewiseCubic, i: number, x: readonly number[]): [number, number] {
  const width = i === 0 ? 0 : x[i] - x[i - 1];
  const [, c1, c2, c3] = coefficients.subarray(4 * i, 4 * i + 4);
  return [c1 + width * (2 * c2 + 3 * c3 * width), coefficients[4 * i + 5]];
}

describe('linearCurve', () => {
  it('is straight between points and goes on with the outer lines', () => {
    const curve = linearCurve(X, Y, null, null);
    const by = [-1, 0.5, 2, 3.5, 5].map((x) => valueOfCurve(curve, x));
    expect(by).toEqual([-1, 0.5, 1.5, 3, 6]);
  });

  it('goes on beyond its ends with the slopes given', () => {
    const curve = linearCurve(X, Y, 0, 7);
    expect([-1, 5].map((x) => valueOfCurve(curve, x))).toEqual([0, 11]);
  });

  it('is what a monotone curve of two points is', () => {
    const [one, other] = [linearCurve, monotoneCurve].map((build) => build([0, 2], [1, 5], null, null));
    expect(one).toEqual(other);
    expect(valueOfCurve(one, 0.5)).toBe(2);
  });
});
