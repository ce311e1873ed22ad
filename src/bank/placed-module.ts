import type { ModuleAgeing } from '../study/ageing-settings.js';
import type { Activation, ModuleParameters } from '../study/study.js';

/** What one BMS protects: its cells from the negative end, each with its own values. */
export interface PlacedModule {
  /** BMS, path and standby; its arrays over cells are not used. */
  readonly parameters: ModuleParameters;
  readonly cells: readonly PlacedCell[];
}

export interface PlacedCell {
  readonly ocv: number;
  readonly capacityAh: number;
  readonly resistanceOhm: number;
  readonly polarisation: readonly { readonly timeConstantS: number; readonly resistanceOhm: number }[];
  readonly hysteresisV: number;
  readonly hysteresisRate: number;
  readonly leakageA: number;
  readonly efficiency: number;
  readonly arrivalCharge: number;
  readonly activation: Activation | undefined;
  readonly ageing: ModuleAgeing | undefined;
}

export function placeModule(parameters: ModuleParameters): PlacedModule {
  return {
    parameters,
    cells: parameters.capacityAh.map((capacityAh, k) => ({
      ocv: parameters.ocv,
      capacityAh,
      resistanceOhm: parameters.resistanceOhm[k],
      polarisation: parameters.polarisation.map(({ timeConstantS, resistanceOhm }) => ({
        timeConstantS,
        resistanceOhm: resistanceOhm[k],
      })),
      hysteresisV: parameters.hysteresisV,
      hysteresisRate: parameters.hysteresisRate,
      leakageA: parameters.leakageA[k],
      efficiency: parameters.efficiency[k],
      arrivalCharge: parameters.arrivalCharge[k],
      activation: parameters.activation,
      ageing: parameters.ageing,
    })),
  };
}

/**
 * Re-houses the cells of a string in one pack: every cell keeps its own values; the pack has one BMS with the draws of
 * the module at position 1, and that module's path once.
 *
 * Such a pack is not a product that can be bought; it shows what one BMS over the full series length would change.
 */
export function rehouse(modules: readonly PlacedModule[]): PlacedModule {
  if (modules.length === 1) return modules[0];
  return {
    parameters: {
      ...modules[0].parameters,
      id: modules.map(({ parameters }) => parameters.id).join('+'),
      ratedAh: Math.min(...modules.map(({ parameters }) => parameters.ratedAh)),
    },
    cells: modules.flatMap(({ cells }) => cells),
  };
}
