import type { OcvCurves } from '../bank/ocv-curves.js';
import { spiceNumber, spiceStatement } from './spice-text.js';

/**
 * An open-circuit curve as a subcircuit: node `u` follows node `z`, V over charge fraction, by the very cubic pieces of the
 * engine; which piece holds is found by halving.
 */
export function ocvSubcircuit(curves: OcvCurves, curve: number): readonly string[] {
  const pieces: { readonly knot: number; readonly text: string }[] = [];
  // Every curve ends with a piece that begins at infinity.
  for (let piece = curves.bucket[curves.firstBucket[curve]]; Number.isFinite(curves.knots[piece]); piece++) {
    const knot = curves.knots[piece];
    const [c0, c1, c2, c3] = curves.coefficients.subarray(4 * piece, 4 * piece + 4);
    pieces.push({ knot, text: cubic(knot, c0, c1, c2, c3) });
  }
  return [
    `.subckt ocv${curve + 1} z u`,
    spiceStatement(
      `Bu u 0 V = ${choice(
        pieces.map(({ knot }) => knot),
        pieces.map(({ text }) => text),
        0,
        pieces.length,
      )}`,
    ),
    '.ends',
  ];
}

function cubic(knot: number, c0: number, c1: number, c2: number, c3: number): string {
  const d = `(v(z) - (${spiceNumber(knot)}))`;
  const slope = c2 === 0 && c3 === 0 ? '' : `${d} * (${spiceNumber(c2)} + ${d} * (${spiceNumber(c3)}))`;
  const inner = slope === '' ? `(${spiceNumber(c1)})` : `(${spiceNumber(c1)} + ${slope})`;
  return `(${spiceNumber(c0)} + ${d} * ${inner})`;
}

/** Of the pieces from `first` up to `end`, the one on which z lies: the last whose knot is not above it. */
function choice(knots: readonly number[], texts: readonly string[], first: number, end: number): string {
  if (end - first === 1) return texts[first];
  const middle = (first + end) >> 1;
  const below = choice(knots, texts, first, middle);
  return `( v(z) < ${spiceNumber(knots[middle])} ? ${below} : ${choice(knots, texts, middle, end)} )`;
}
