import type { Candidate } from '../study/study.js';
import type { PlacedModule } from './placed-module.js';

/** Temperature at which resistances, leakage and open-circuit voltage of cells are stated, K (25 degC). */
export const REFERENCE_K = 298.15;

/** Molar gas constant, J/(mol K), rounded as the papers round it from which laws of cells are taken. */
export const GAS_J_PER_MOL_K = 8.314;

/** What of a bank follows temperature, and how. Cells and modules are numbered as in `Bank`. */
export interface BankTemperature {
  /** By how much each module is warmer than ambient, K. */
  readonly offsetK: Float64Array;
  /** Activation energies of each cell, J/mol. */
  readonly resistanceJPerMol: Float64Array;
  readonly leakageJPerMol: Float64Array;
  /** Charging is refused below one temperature until the other; `-Infinity` = never. */
  readonly refusalK: Float64Array;
  readonly releaseK: Float64Array;
}

/**
 * What of a bank follows temperature. A re-housed pack stands in one slot, that of position 1, whose module's offset
 * and BMS it has; its cells keep their own activation energies.
 */
export function bankTemperature(candidate: Candidate, placed: readonly (readonly PlacedModule[])[]): BankTemperature {
  const modules = placed.flat();
  const cells = modules.flatMap((module) => module.cells);
  const slots = placed.flatMap((string, s) => string.map((_, p) => candidate.slotOffsetK?.[s]?.[p] ?? 0));
  return {
    offsetK: Float64Array.from(modules, ({ parameters }, m) => slots[m] + (parameters.temperatureOffsetK ?? 0)),
    resistanceJPerMol: Float64Array.from(cells, ({ activation }) => activation?.resistanceJPerMol ?? 0),
    leakageJPerMol: Float64Array.from(cells, ({ activation }) => activation?.leakageJPerMol ?? 0),
    refusalK: Float64Array.from(modules, ({ parameters }) => refusal(parameters)?.belowK ?? Number.NEGATIVE_INFINITY),
    releaseK: Float64Array.from(modules, ({ parameters }) => refusal(parameters)?.releaseK ?? Number.NEGATIVE_INFINITY),
  };
}

const refusal = ({ bms }: PlacedModule['parameters']) => bms.chargeRefusal;

/**
 * Factor by which a rate of activation energy Ea is faster at a temperature T than at 25 degC (Arrhenius).
 *
 *   f(T) = exp(-Ea / R (1/T - 1/298.15 K))
 *
 * Leakage grows by it when it is warm; resistances fall: they grow by f(T) of -Ea.
 */
export function arrheniusFactor(activationJPerMol: number, temperatureK: number): number {
  return Math.exp((-activationJPerMol / GAS_J_PER_MOL_K) * (1 / temperatureK - 1 / REFERENCE_K));
}

/** Charge out of reach at temperatures in K, straight lines between and on beyond the coldest [own choice]. */
const FLOOR = [
  { temperatureK: 263.15, charge: 0.12 },
  { temperatureK: 273.15, charge: 0.05 },
  { temperatureK: 298.15, charge: 0 },
] as const;
const HIGHEST_FLOOR = 0.5;

/**
 * Charge fraction z_T at which a cold cell is as empty as one at 25 degC is at 0: what is below cannot be had until it is
 * warm again. From 25 degC on 0; never above 0.5.
 */
export function chargeFloor(temperatureK: number): number {
  const [cold, cool, reference] = FLOOR;
  const [low, high] = temperatureK < cool.temperatureK ? [cold, cool] : [cool, reference];
  const share = (temperatureK - low.temperatureK) / (high.temperatureK - low.temperatureK);
  return Math.min(HIGHEST_FLOOR, Math.max(0, low.charge + share * (high.charge - low.charge)));
}
