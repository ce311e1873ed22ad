import type { OcvTable } from '../../src/study/study.js';

/** Open-circuit voltage of a cell, V, at a charge fraction, which may leave 0..1. */
export type OcvCurve = (chargeFraction: number) => number;

/**
 * The curve through an OCV table.
 *
 * `linear`: straight between neighbouring points. `monotone`: the cubic Hermite interpolant with the slopes of Fritsch
 * and Butland, usually called PCHIP. With h_i = x_(i+1) - x_i and s_i = (y_(i+1) - y_i) / h_i:
 *
 *   inside:  d_i = 0 if s_(i-1) s_i <= 0, else (w1 + w2) / (w1 / s_(i-1) + w2 / s_i),
 *            w1 = 2 h_i + h_(i-1),  w2 = h_i + 2 h_(i-1)                       (weighted harmonic mean)
 *   ends:    d_0 = ((2 h_0 + h_1) s_0 - h_0 s_1) / (h_0 + h_1)                 (one-sided, three points)
 *            0 if its sign is not that of s_0; 3 s_0 if s_0 and s_1 differ in sign and |d_0| > 3 |s_0|; mirrored at
 *            the last point; two points only: the straight line
 *
 * Beyond the ends both continue straight with the table's `slopeBelowV` and `slopeAboveV`, or, where these are null,
 * with the slope of the curve at that end (`linear`: of the outermost stretch).
 *
 * @see F. N. Fritsch & R. E. Carlson, SIAM J. Numer. Anal. 17 (1980) 238; F. N. Fritsch & J. Butland, SIAM J. Sci. Stat.
 *   Comput. 5 (1984) 300; C. Moler, Numerical Computing with MATLAB (2004), section 3.6, for the end slopes
 */
export function ocvCurve(table: OcvTable): OcvCurve {
  const x = table.chargeFraction;
  const y = table.voltageV;
  const last = x.length - 1;
  const slopes = table.interpolation === 'monotone' ? monotoneSlopes(x, y) : null;
  const secant = (i: number): number => (y[i + 1] - y[i]) / (x[i + 1] - x[i]);
  const slopeBelow = table.slopeBelowV ?? (slopes ? slopes[0] : secant(0));
  const slopeAbove = table.slopeAboveV ?? (slopes ? slopes[last] : secant(last - 1));

  return (z) => {
    if (z <= x[0]) return y[0] + slopeBelow * (z - x[0]);
    if (z >= x[last]) return y[last] + slopeAbove * (z - x[last]);
    let low = 0;
    let high = last;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (x[middle] <= z) low = middle;
      else high = middle;
    }
    const width = x[high] - x[low];
    const u = (z - x[low]) / width;
    if (slopes === null) return y[low] + u * (y[high] - y[low]);
    const v = 1 - u;
    return (
      y[low] * (1 + 2 * u) * v * v +
      slopes[low] * width * u * v * v +
      y[high] * u * u * (3 - 2 * u) -
      slopes[high] * width * u * u * v
    );
  };
}

function monotoneSlopes(x: readonly number[], y: readonly number[]): number[] {
  const count = x.length;
  const h = x.slice(1).map((right, i) => right - x[i]);
  const s = h.map((width, i) => (y[i + 1] - y[i]) / width);
  if (count === 2) return [s[0], s[0]];
  const inner = s.slice(1).map((right, k) => {
    const left = s[k];
    if (left * right <= 0) return 0;
    const w1 = 2 * h[k + 1] + h[k];
    const w2 = h[k + 1] + 2 * h[k];
    return (w1 + w2) / (w1 / left + w2 / right);
  });
  return [endSlope(h[0], h[1], s[0], s[1]), ...inner, endSlope(h[count - 2], h[count - 3], s[count - 2], s[count - 3])];
}

function endSlope(nearWidth: number, farWidth: number, near: number, far: number): number {
  const slope = ((2 * nearWidth + farWidth) * near - nearWidth * far) / (nearWidth + farWidth);
  if (slope * near <= 0) return 0;
  if (near * far < 0 && Math.abs(slope) > 3 * Math.abs(near)) return 3 * near;
  return slope;
}
