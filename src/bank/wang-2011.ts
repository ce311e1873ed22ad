import { GAS_J_PER_MOL_K } from './temperature.js';

/** Capacity of the cell that was measured, Ah: throughput is scaled by it. */
const MEASURED_CELL_AH = 2.2;

/** Power of throughput in Wang's law. */
export const WANG_EXPONENT = 0.552;

/**
 * Factor of fade by throughput, fit at C/2 of a LiFePO4 cell.
 *
 *   f = 0.01 x 30330 exp(-31500 / (R T)) A^0.552,   A: throughput of a cell of 2.2 Ah, Ah
 *
 * The fit covers 15 to 60 degC. Depth and charge do not enter, nor does time at rest.
 *
 * @returns fraction of capacity per Ah^0.552
 * @see Wang et al. 2011, J. Power Sources 196, 3942-3948
 */
export function wangFactor(temperatureK: number): number {
  return 0.01 * 30_330 * Math.exp(-31_500 / (GAS_J_PER_MOL_K * temperatureK));
}

/**
 * Throughput A of Wang's law for a cell of any capacity.
 *
 * @param equivalentCycles charge through the cell, one way, over its capacity when new
 * @returns Ah of a cell of 2.2 Ah
 */
export function wangThroughputAh(equivalentCycles: number): number {
  return MEASURED_CELL_AH * equivalentCycles;
}
