import type { OcvCurves } from './ocv-curves.js';

/** A curve at a temperature: the number of the curve, and the charge fraction out of reach. */
export interface ColdCurve {
  readonly curve: number;
  readonly floor: number;
}

/**
 * Open-circuit curves drawn together above a floor z_T [own choice]: a cell is as empty at z_T as at 0 when it is warm,
 * and full at 1 all the same.
 *
 *   U_T(z) = U((z - z_T) / (1 - z_T))
 *
 * A piece sum_k c_k (x - x_i)^k of U becomes sum_k c_k / (1 - z_T)^k (z - z_i)^k with z_i = z_T + (1 - z_T) x_i: so the
 * floor costs nothing where voltages are looked up.
 *
 * @param cold the curves wanted; their place in the list is their number in the result
 */
export function coldCurves(curves: OcvCurves, cold: readonly ColdCurve[]): OcvCurves {
  const knots: number[] = [];
  const coefficients: number[] = [];
  const bucket: number[] = [];
  const firstBucket = new Int32Array(cold.length);
  const buckets = new Int32Array(cold.length);
  const lowest = new Float64Array(cold.length);
  const perUnit = new Float64Array(cold.length);
  cold.forEach(({ curve, floor }, k) => {
    const span = 1 - floor;
    const from = curves.bucket[curves.firstBucket[curve]];
    const shift = knots.length - from;
    firstBucket[k] = bucket.length;
    buckets[k] = curves.buckets[curve];
    lowest[k] = floor + span * curves.lowest[curve];
    perUnit[k] = curves.perUnit[curve] / span;
    for (let cell = 0; cell < buckets[k]; cell++) bucket.push(curves.bucket[curves.firstBucket[curve] + cell] + shift);
    // The pieces of a curve end with one that begins at infinity.
    for (let piece = from; ; piece++) {
      knots.push(floor + span * curves.knots[piece]);
      for (let power = 0; power < 4; power++) coefficients.push(curves.coefficients[4 * piece + power] / span ** power);
      if (curves.knots[piece] === Number.POSITIVE_INFINITY) break;
    }
  });
  return {
    knots: Float64Array.from(knots),
    coefficients: Float64Array.from(coefficients),
    bucket: Int32Array.from(bucket),
    firstBucket,
    buckets,
    lowest,
    perUnit,
    hasKinks: curves.hasKinks,
  };
}
