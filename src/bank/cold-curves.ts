import { curveOf, joinCurves, type OcvCurve, type OcvCurves } from './ocv-curves.js';

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
  return joinCurves(
    cold.map(({ curve, floor }) => drawnTogether(curveOf(curves, curve), floor)),
    curves.hasKinks,
  );
}

function drawnTogether(curve: OcvCurve, floor: number): OcvCurve {
  const span = 1 - floor;
  const powers = [1, span, span ** 2, span ** 3];
  return {
    knots: curve.knots.map((knot) => floor + span * knot),
    coefficients: curve.coefficients.map((coefficient, at) => coefficient / powers[at % 4]),
    bucket: curve.bucket,
    lowest: floor + span * curve.lowest,
    perUnit: curve.perUnit / span,
  };
}
