import type { Bank } from './bank.js';
import { sumChains } from './chain-sums.js';
import { moduleOhm } from './equaliser.js';

/**
 * A bank whose cells have lost capacity and gained resistance since the start of the course.
 *
 *   Q = Q0 x,   R = R0 (1 + g (1 - x)),   x: capacity left of that at the start, g: growth of resistance
 *
 * Series and polarisation resistances grow alike; BMS paths, joints and leads do not.
 *
 * @param bank at the start of the course and at 25 degC
 * @param left x of each cell
 */
export function agedBank(bank: Bank, left: Float64Array): Bank {
  const { cells, moduleOfCell, chainOfModule, ageing } = bank;
  const capacityAs = bank.capacityAs.map((capacity, c) => capacity * left[c]);
  const hysteresisPerAs = bank.hysteresisPerAs.map((perAs, c) => perAs / left[c]);
  const resistanceOhm = Float64Array.from(bank.resistanceOhm);
  const polarisationOhm = Float64Array.from(bank.polarisationOhm);
  const chainCapacityAs = new Float64Array(bank.chainCapacityAs.length).fill(Number.POSITIVE_INFINITY);
  for (let c = 0; c < cells; c++) {
    const resists = 1 + (ageing?.[c]?.resistanceGrowth ?? 0) * (1 - left[c]);
    resistanceOhm[c] *= resists;
    for (let at = c; at < polarisationOhm.length; at += cells) polarisationOhm[at] *= resists;
    const i = chainOfModule[moduleOfCell[c]];
    chainCapacityAs[i] = Math.min(chainCapacityAs[i], capacityAs[c]);
  }
  const sums = sumChains({ ...bank, resistanceOhm, polarisationOhm });
  return {
    ...bank,
    capacityAs,
    hysteresisPerAs,
    resistanceOhm,
    polarisationOhm,
    chainCapacityAs,
    ...sums,
    equaliser: bank.equaliser && { ...bank.equaliser, moduleOhm: moduleOhm(bank.wiring, sums.chainOhm) },
  };
}
