import { linearCurve, monotoneCurve } from '../mathematics/piecewise-cubic.js';
import type { OcvTable } from '../study/study.js';

/**
 * The open-circuit voltage curves U(z) of a study, laid end to end for the hot loop.
 *
 * Curve k has its pieces from `firstPiece[k]` on; `bucket` maps an even grid over its table to the piece that holds the
 * left edge of the grid cell, so that finding a piece takes one look and hardly ever a second.
 */
export interface OcvCurves {
  readonly knots: Float64Array;
  readonly coefficients: Float64Array;
  readonly bucket: Int32Array;
  readonly firstBucket: Int32Array;
  readonly buckets: Int32Array;
  readonly lowest: Float64Array;
  readonly perUnit: Float64Array;
  /** Some curve has kinks, which no error estimate of a step sees. */
  readonly hasKinks: boolean;
}

/** One curve by itself: its pieces, the last of which begins at infinity, and its grid over them. */
export interface OcvCurve {
  readonly knots: Float64Array;
  /** Of 1, d, d^2 and d^3 from the knot, piece by piece. */
  readonly coefficients: Float64Array;
  readonly bucket: Int32Array;
  readonly lowest: number;
  readonly perUnit: number;
}

const BUCKETS = 1024;

/** Curves of all tables of a study; index = index of the table. */
export function compileOcvCurves(tables: readonly OcvTable[]): OcvCurves {
  return joinCurves(
    tables.map(compileCurve),
    tables.some(({ interpolation }) => interpolation === 'linear'),
  );
}

/** Lays curves end to end; index = place in the list. */
export function joinCurves(curves: readonly OcvCurve[], hasKinks: boolean): OcvCurves {
  const pieces = curves.reduce((sum, curve) => sum + curve.knots.length, 0);
  const cells = curves.reduce((sum, curve) => sum + curve.bucket.length, 0);
  const joined = {
    knots: new Float64Array(pieces),
    coefficients: new Float64Array(4 * pieces),
    bucket: new Int32Array(cells),
    firstBucket: new Int32Array(curves.length),
    buckets: Int32Array.from(curves, ({ bucket }) => bucket.length),
    lowest: Float64Array.from(curves, ({ lowest }) => lowest),
    perUnit: Float64Array.from(curves, ({ perUnit }) => perUnit),
    hasKinks,
  };
  let piece = 0;
  let cell = 0;
  curves.forEach((curve, index) => {
    const first = piece;
    joined.firstBucket[index] = cell;
    joined.knots.set(curve.knots, first);
    joined.coefficients.set(curve.coefficients, 4 * first);
    joined.bucket.set(
      curve.bucket.map((own) => first + own),
      cell,
    );
    piece += curve.knots.length;
    cell += curve.bucket.length;
  });
  return joined;
}

/** Curve `index` by itself: what `joinCurves` was given. */
export function curveOf(curves: OcvCurves, index: number): OcvCurve {
  const grid = curves.bucket.subarray(curves.firstBucket[index], curves.firstBucket[index] + curves.buckets[index]);
  const [first] = grid;
  const end = curves.knots.indexOf(Number.POSITIVE_INFINITY, first) + 1;
  return {
    knots: curves.knots.subarray(first, end),
    coefficients: curves.coefficients.subarray(4 * first, 4 * end),
    bucket: grid.map((piece) => piece - first),
    lowest: curves.lowest[index],
    perUnit: curves.perUnit[index],
  };
}

function compileCurve(table: OcvTable): OcvCurve {
  const build = table.interpolation === 'linear' ? linearCurve : monotoneCurve;
  const { knots, coefficients } = build(table.chargeFraction, table.voltageV, table.slopeBelowV, table.slopeAboveV);
  const [low] = knots;
  const span = knots[knots.length - 1] - low;
  // Bucket 0 is everything below the table, the last one everything above it.
  const bucket = [0];
  let piece = 1;
  for (let cell = 0; cell < BUCKETS; cell++) {
    const left = low + (cell * span) / BUCKETS;
    while (piece + 1 < knots.length - 1 && knots[piece + 1] <= left) piece++;
    bucket.push(piece);
  }
  bucket.push(knots.length - 1);
  return {
    knots: Float64Array.of(...knots, Number.POSITIVE_INFINITY),
    coefficients: Float64Array.of(...coefficients, 0, 0, 0, 0),
    bucket: Int32Array.from(bucket),
    lowest: low,
    perUnit: BUCKETS / span,
  };
}

/** Index of the piece of curve `index` that holds charge fraction `z` (any finite value). */
export function findPiece(curves: OcvCurves, index: number, z: number): number {
  const position = (z - curves.lowest[index]) * curves.perUnit[index] + 1;
  const most = curves.buckets[index] - 1;
  const cell = position < 1 ? 0 : position >= most ? most : position | 0;
  let piece = curves.bucket[curves.firstBucket[index] + cell];
  // A grid cell can hold several pieces where the table is fine.
  if (cell > 0) while (z >= curves.knots[piece + 1]) piece++;
  return piece;
}

/** Open-circuit voltage of curve `index` at charge fraction `z` (any finite value), V. */
export function ocvV(curves: OcvCurves, index: number, z: number): number {
  const piece = findPiece(curves, index, z);
  const d = z - curves.knots[piece];
  const c = curves.coefficients;
  const at = 4 * piece;
  return ((c[at + 3] * d + c[at + 2]) * d + c[at + 1]) * d + c[at];
}
