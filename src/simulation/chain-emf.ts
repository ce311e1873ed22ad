import type { Kernel } from './kernel.js';

/**
 * EMF of every chain, V, `elapsedS` into the step with charges `passedAs` and filtered currents `filterA`:
 *
 *   E = sum over cells of U(z) + M h + offset voltage, + sum_k R_k filter_k
 *
 * Writes `point.cellV` and `point.emfV`.
 */
export function updateEmf(kernel: Kernel, elapsedS: number, passedAs: Float64Array, filterA: Float64Array): void {
  const { bank, state, point, chargePerAs, chargePerS, offsetA, chainFixedV } = kernel;
  const { charge, hysteresis } = state;
  const { curveOfCell, ocv, hasHysteresis, hysteresisV, hysteresisPerAs, chainPolarisationOhm, chainCellStart } = bank;
  const { knots, coefficients, bucket } = ocv;
  const { cellV, cellHysteresis, pieceOfCell, emfV } = point;
  const chains = emfV.length;
  let curve = -1;
  let lowest = 0;
  let perUnit = 0;
  let firstBucket = 0;
  let most = 0;
  for (let i = 0; i < chains; i++) {
    const q = passedAs[i];
    const start = chainCellStart[i];
    const end = chainCellStart[i + 1];
    // The path gamma q / Q of the chain's first cell stands for those of the others but for a small difference.
    const chainPath = hysteresisPerAs[start] * (q - offsetA[start] * elapsedS);
    const chainDecay = hasHysteresis ? Math.exp(-Math.abs(chainPath)) : 1;
    let sum = chainFixedV[i];
    for (let c = start; c < end; c++) {
      const z = charge[c] + chargePerAs[c] * q + chargePerS[c] * elapsedS;
      // ocvV() of bank/ocv-curves.ts, written out: the call costs a third of the evaluation.
      if (curveOfCell[c] !== curve) {
        curve = curveOfCell[c];
        lowest = ocv.lowest[curve];
        perUnit = ocv.perUnit[curve];
        firstBucket = ocv.firstBucket[curve];
        most = ocv.buckets[curve] - 1;
      }
      // The piece of the last look is nearly always the right one still.
      let piece = pieceOfCell[c];
      if (!(z >= knots[piece] && z < knots[piece + 1])) {
        const position = (z - lowest) * perUnit + 1;
        const cell = position < 1 ? 0 : position >= most ? most : position | 0;
        piece = bucket[firstBucket + cell];
        if (cell > 0) while (z >= knots[piece + 1]) piece++;
        pieceOfCell[c] = piece;
      }
      const d = z - knots[piece];
      const at = piece << 2;
      let volts = ((coefficients[at + 3] * d + coefficients[at + 2]) * d + coefficients[at + 1]) * d + coefficients[at];
      if (hasHysteresis) {
        // hysteresisAfter(), by the exponential of the chain and three terms of the series for what the cell differs by.
        const h = hysteresis[c];
        const path = hysteresisPerAs[c] * (q - offsetA[c] * elapsedS);
        const branch = path >= 0 ? 1 : -1;
        const more = branch * (path - chainPath);
        const decay =
          more * more < 0.01 && branch * chainPath >= 0
            ? chainDecay * (1 - more * (1 - more * (0.5 - more / 6)))
            : Math.exp(-branch * path);
        const hAfter = branch + (h - branch) * decay;
        cellHysteresis[c] = hAfter;
        volts += hysteresisV[c] * hAfter;
      }
      cellV[c] = volts;
      sum += volts;
    }
    emfV[i] = sum;
  }
  for (let first = 0; first < chainPolarisationOhm.length; first += chains) {
    for (let i = 0; i < chains; i++) emfV[i] += chainPolarisationOhm[first + i] * filterA[first + i];
  }
}

/**
 * Hysteresis state after a passed charge of one sign.
 *
 *   dh/dt = gamma |I| / Q (sign(I) - h)   =>   h = s + (h0 - s) exp(-gamma |q| / Q),   s = sign(q)
 *
 * Exact while the current keeps its sign.
 *
 * @param passedAs charge into the cell, As
 * @param perAs gamma / Q, 1/As
 * @see Plett 2015, Battery Management Systems vol. 1, ch. 2 (one-state hysteresis)
 */
export function hysteresisAfter(h: number, passedAs: number, perAs: number): number {
  if (passedAs >= 0) return h === 1 ? 1 : 1 + (h - 1) * Math.exp(-perAs * passedAs);
  return h === -1 ? -1 : -1 + (h + 1) * Math.exp(perAs * passedAs);
}
