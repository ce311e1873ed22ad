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

const BUCKETS = 1024;

/** Curves of all tables of a study; index = index of the table. */
export function compileOcvCurves(tables: readonly OcvTable[]): OcvCurves {
  const knots: number[] = [];
  const coefficients: number[] = [];
  const bucket: number[] = [];
  const firstBucket = new Int32Array(tables.length);
  const buckets = new Int32Array(tables.length);
  const lowest = new Float64Array(tables.length);
  const perUnit = new Float64Array(tables.length);
  tables.forEach((table, index) => {
    const build = table.interpolation === 'linear' ? linearCurve : monotoneCurve;
    const curve = build(table.chargeFraction, table.voltageV, table.slopeBelowV, table.slopeAboveV);
    const first = knots.length;
    const low = curve.knots[0];
    const span = curve.knots[curve.knots.length - 1] - low;
    firstBucket[index] = bucket.length;
    buckets[index] = BUCKETS + 2;
    lowest[index] = low;
    perUnit[index] = BUCKETS / span;
    // Bucket 0 is everything below the table, the last one everything above it.
    bucket.push(first);
    let piece = 1;
    for (let cell = 0; cell < BUCKETS; cell++) {
      const left = low + (cell * span) / BUCKETS;
      while (piece + 1 < curve.knots.length - 1 && curve.knots[piece + 1] <= left) piece++;
      bucket.push(first + piece);
    }
    bucket.push(first + curve.knots.length - 1);
    knots.push(...curve.knots, Number.POSITIVE_INFINITY);
    coefficients.push(...curve.coefficients, 0, 0, 0, 0);
  });
  return {
    knots: Float64Array.from(knots),
    coefficients: Float64Array.from(coefficients),
    bucket: Int32Array.from(bucket),
    firstBucket,
    buckets,
    lowest,
    perUnit,
    hasKinks: tables.some(({ interpolation }) => interpolation === 'linear'),
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
