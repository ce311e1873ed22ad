/**
 * A curve of cubic pieces, continued linearly beyond both ends.
 *
 * Piece i holds on [knots[i], knots[i + 1]): y = ((c3 d + c2) d + c1) d + c0 with d = x - knots[i]; piece 0 lies below
 * the first point (its knot is the first point too) and the last piece above the last point.
 */
export interface PiecewiseCubic {
  /** First points of the pieces; `knots[0]` equals `knots[1]`. */
  readonly knots: Float64Array;
  /** Four coefficients for each piece, c0 first. */
  readonly coefficients: Float64Array;
}

/**
 * Straight lines between points.
 *
 * @param x strictly ascending, at least two
 * @param slopeBelow slope before the first point; null = that of the first line
 * @param slopeAbove slope after the last point; null = that of the last line
 */
export function linearCurve(
  x: readonly number[],
  y: readonly number[],
  slopeBelow: number | null,
  slopeAbove: number | null,
): PiecewiseCubic {
  const last = x.length - 1;
  const pieces = x.slice(1).map((right, i) => [y[i], (y[i + 1] - y[i]) / (right - x[i]), 0, 0]);
  return assemble(x, y, pieces, slopeBelow ?? pieces[0][1], slopeAbove ?? pieces[last - 1][1]);
}

/**
 * Shape-preserving cubic curve: monotone wherever the points are, with continuous slope.
 *
 * Inner slopes are weighted harmonic means of the neighbouring lines' slopes, zero at a local extremum; end slopes are
 * the three-point formula, limited so that they keep the shape.
 *
 * @param x strictly ascending, at least two
 * @see Fritsch & Butland 1984, SIAM J. Sci. Stat. Comput. 5(2), 300-304 (inner slopes as weighted by Brodlie);
 *   Moler 2004, Numerical Computing with MATLAB, section 3.4 (end slopes)
 */
export function monotoneCurve(
  x: readonly number[],
  y: readonly number[],
  slopeBelow: number | null,
  slopeAbove: number | null,
): PiecewiseCubic {
  const last = x.length - 1;
  const width = x.slice(1).map((right, i) => right - x[i]);
  const line = width.map((h, i) => (y[i + 1] - y[i]) / h);
  if (last === 1) return linearCurve(x, y, slopeBelow, slopeAbove);
  const slope = x.map((_, i) => {
    if (i === 0) return endSlope(width[0], width[1], line[0], line[1]);
    if (i === last) return endSlope(width[last - 1], width[last - 2], line[last - 1], line[last - 2]);
    if (line[i - 1] * line[i] <= 0) return 0;
    const before = 2 * width[i] + width[i - 1];
    const after = width[i] + 2 * width[i - 1];
    return (before + after) / (before / line[i - 1] + after / line[i]);
  });
  const pieces = width.map((h, i) => [
    y[i],
    slope[i],
    (3 * line[i] - 2 * slope[i] - slope[i + 1]) / h,
    (slope[i] + slope[i + 1] - 2 * line[i]) / (h * h),
  ]);
  return assemble(x, y, pieces, slopeBelow ?? slope[0], slopeAbove ?? slope[last]);
}

/** Value of the curve at any x, by bisection over the pieces. */
export function valueOfCurve(curve: PiecewiseCubic, x: number): number {
  const { knots, coefficients } = curve;
  let low = 0;
  let high = knots.length - 1;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if (x >= knots[middle]) low = middle;
    else high = middle - 1;
  }
  const d = x - knots[low];
  const at = 4 * low;
  return ((coefficients[at + 3] * d + coefficients[at + 2]) * d + coefficients[at + 1]) * d + coefficients[at];
}

function endSlope(h: number, nextH: number, line: number, nextLine: number): number {
  const slope = ((2 * h + nextH) * line - h * nextLine) / (h + nextH);
  if (slope * line <= 0) return 0;
  if (line * nextLine <= 0 && Math.abs(slope) > 3 * Math.abs(line)) return 3 * line;
  return slope;
}

function assemble(
  x: readonly number[],
  y: readonly number[],
  pieces: readonly (readonly number[])[],
  slopeBelow: number,
  slopeAbove: number,
): PiecewiseCubic {
  const last = x.length - 1;
  const all = [[y[0], slopeBelow, 0, 0], ...pieces, [y[last], slopeAbove, 0, 0]];
  return { knots: Float64Array.from([x[0], ...x]), coefficients: Float64Array.from(all.flat()) };
}
