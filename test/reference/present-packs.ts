import type { Cell, Packs } from './packs.js';

/** Temperature at which values of cells are stated, K. */
export const STATED_K = 298.15;
const GAS_J_PER_MOL_K = 8.314;

/**
 * Packs as they are at an ambient temperature and an age: resistances and leakage of a cell follow Arrhenius' law, its
 * open-circuit curve is squeezed above the floor, its capacity is what is left and its resistances have grown with the
 * loss. The path of the BMS stays.
 *
 * @param base as written down
 * @param leftOf capacity left of that of `base`, as a fraction
 */
export function presentPacks(base: Packs, ambientK: number, leftOf: (cell: Cell) => number): Packs {
  const packs = base.packs.map((pack) => {
    const kelvin = ambientK + pack.offsetK;
    const cells = pack.cells.map((cell) => presentCell(cell, kelvin, leftOf(cell)));
    return {
      ...pack,
      cells,
      resistanceOhm: cells.reduce((sum, cell) => sum + cell.resistanceOhm, pack.module.pathResistanceOhm),
    };
  });
  return { ...base, packs };
}

function presentCell(cell: Cell, kelvin: number, left: number): Cell {
  // How much more thermal energy there is at the reference than now, per J/mol.
  const perJoule = (1 / kelvin - 1 / STATED_K) / GAS_J_PER_MOL_K;
  const resists = Math.exp((cell.activation?.resistanceJPerMol ?? 0) * perJoule);
  const grown = 1 + (cell.ageing?.resistanceGrowth ?? 0) * (1 - left);
  const floor = floorAt(kelvin);
  return {
    ...cell,
    capacityAs: left * cell.capacityAs,
    resistanceOhm: cell.resistanceOhm * resists * grown,
    pairs: cell.pairs.map((pair) => ({ ...pair, resistanceOhm: pair.resistanceOhm * resists * grown })),
    leakageA: cell.leakageA / Math.exp((cell.activation?.leakageJPerMol ?? 0) * perJoule),
    floor,
    curve: floor === 0 ? cell.curve : (z) => cell.curve((z - floor) / (1 - floor)),
  };
}

/** Out of reach: 0 at 25 degC, 0.05 at 0, 0.12 at -10, in straight lines and on below; never more than a half. */
function floorAt(kelvin: number): number {
  const celsius = kelvin - 273.15;
  if (celsius >= 25) return 0;
  return celsius >= 0 ? (0.05 * (25 - celsius)) / 25 : Math.min(0.5, 0.05 - (0.07 * celsius) / 10);
}
