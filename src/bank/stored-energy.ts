import type { Bank } from './bank.js';
import { findPiece, type OcvCurves } from './ocv-curves.js';

/**
 * Energy that the cells of a bank gain between two charges, at their open-circuit voltages, J.
 *
 *   E = sum over cells of Q integral from z0 to z1 of U(z) dz
 *
 * Polarisation and hysteresis hold nothing worth counting beside it.
 */
export function storedEnergyGainJ(bank: Bank, fromCharge: Float64Array, toCharge: Float64Array): number {
  let sum = 0;
  for (let c = 0; c < bank.cells; c++) {
    sum += bank.capacityAs[c] * ocvIntegralV(bank.ocv, bank.curveOfCell[c], fromCharge[c], toCharge[c]);
  }
  return sum;
}

/** Integral of curve `index` over charge fraction from `from` to `to`, exact piece by piece, V. */
export function ocvIntegralV(curves: OcvCurves, index: number, from: number, to: number): number {
  if (to < from) return -ocvIntegralV(curves, index, to, from);
  const { knots } = curves;
  const last = findPiece(curves, index, to);
  let piece = findPiece(curves, index, from);
  let sum = -antiderivative(curves, piece, from - knots[piece]);
  for (; piece < last; piece++) sum += antiderivative(curves, piece, knots[piece + 1] - knots[piece]);
  return sum + antiderivative(curves, last, to - knots[last]);
}

function antiderivative({ coefficients }: OcvCurves, piece: number, d: number): number {
  const at = 4 * piece;
  const cubic = (coefficients[at + 3] / 4) * d + coefficients[at + 2] / 3;
  return ((cubic * d + coefficients[at + 1] / 2) * d + coefficients[at]) * d;
}
