import { findPiece } from '../bank/ocv-curves.js';
import { staysOnBranch } from './hysteresis-branch.js';
import type { Kernel } from './kernel.js';

/**
 * EMF of every chain, V, `elapsedS` into the step with charges `passedAs` and filtered currents `filterA`:
 *
 *   E = sum over cells of U(z) + M h + offset voltage, + sum_k R_k filter_k
 *
 * Writes `point.cellV`, `point.cellHysteresis` and `point.emfV`. Two short loops over the cells instead of one long one:
 * with all arrays in one loop the compiler runs out of registers and it takes three times as long.
 */
export function updateEmf(kernel: Kernel, elapsedS: number, passedAs: Float64Array, filterA: Float64Array): void {
  addOpenCircuit(kernel, elapsedS, passedAs);
  if (kernel.bank.hasHysteresis) addHysteresis(kernel, elapsedS, passedAs);
  const { chainPolarisationOhm } = kernel.bank;
  const { emfV } = kernel.point;
  const chains = emfV.length;
  for (let first = 0; first < chainPolarisationOhm.length; first += chains) {
    for (let i = 0; i < chains; i++) emfV[i] += chainPolarisationOhm[first + i] * filterA[first + i];
  }
}

/** Begins the EMFs with what stands still and the open-circuit voltages. */
function addOpenCircuit(kernel: Kernel, elapsedS: number, passedAs: Float64Array): void {
  const { bank, state, point, chargePerAs, chargePerS, chainFixedV } = kernel;
  const { charge } = state;
  const { chainCellStart, curveOfCell, ocv } = bank;
  const { knots, coefficients } = ocv;
  const { cellV, pieceOfCell, emfV } = point;
  for (let i = 0; i < emfV.length; i++) {
    const q = passedAs[i];
    const end = chainCellStart[i + 1];
    let sum = chainFixedV[i];
    for (let c = chainCellStart[i]; c < end; c++) {
      const z = charge[c] + chargePerAs[c] * q + chargePerS[c] * elapsedS;
      // ocvV() of bank/ocv-curves.ts, written out. The piece of the last look is nearly always the right one still, or one
      // close by; what lies far off is looked up.
      let piece = pieceOfCell[c];
      if (!(z >= knots[piece] && z < knots[piece + 1])) {
        if (z < knots[piece])
          piece = piece > 0 && z >= knots[piece - 1] ? piece - 1 : findPiece(ocv, curveOfCell[c], z);
        else while (z >= knots[piece + 1]) piece++;
        pieceOfCell[c] = piece;
      }
      const d = z - knots[piece];
      const at = piece << 2;
      const volts =
        ((coefficients[at + 3] * d + coefficients[at + 2]) * d + coefficients[at + 1]) * d + coefficients[at];
      cellV[c] = volts;
      sum += volts;
    }
    emfV[i] = sum;
  }
}

/** Difference of paths within a chain up to which three terms of the series do: 4e-6 of the hysteresis. */
const MOST_APART = 0.1;

/** Adds the hysteresis of the cells: by one exponential a chain, and the series for what the paths of its cells differ. */
function addHysteresis(kernel: Kernel, elapsedS: number, passedAs: Float64Array): void {
  const { bank, point, offsetA } = kernel;
  const { hysteresis } = kernel.state;
  const { hysteresisV, hysteresisPerAs, chainCellStart } = bank;
  const { cellHysteresis, cellV, emfV } = point;
  for (let i = 0; i < emfV.length; i++) {
    const q = passedAs[i];
    const start = chainCellStart[i];
    const end = chainCellStart[i + 1];
    if (staysOnBranch(kernel, i, q, elapsedS)) {
      const branch = kernel.branch[i];
      for (let c = start; c < end; c++) cellV[c] += branch * hysteresisV[c];
      emfV[i] += branch * bank.chainHysteresisV[i];
      continue;
    }
    const chainPath = Math.abs(hysteresisPerAs[start] * (q - offsetA[start] * elapsedS));
    const chainDecay = Math.exp(-chainPath);
    let apart = 0;
    for (let c = start; c < end; c++) {
      const path = hysteresisPerAs[c] * (q - offsetA[c] * elapsedS);
      const branch = Math.sign(path);
      const more = Math.abs(path) - chainPath;
      const decay = chainDecay * (1 - more * (1 - more * (0.5 - more * (1 / 6))));
      cellHysteresis[c] = branch + (hysteresis[c] - branch) * decay;
      apart = Math.max(apart, Math.abs(more));
    }
    if (apart > MOST_APART) {
      for (let c = start; c < end; c++) {
        cellHysteresis[c] = hysteresisAfter(hysteresis[c], q - offsetA[c] * elapsedS, hysteresisPerAs[c]);
      }
    }
    let sum = 0;
    for (let c = start; c < end; c++) {
      const volts = hysteresisV[c] * cellHysteresis[c];
      cellV[c] += volts;
      sum += volts;
    }
    emfV[i] += sum;
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
