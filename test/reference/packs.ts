import type { ModuleAgeing } from '../../src/study/ageing-settings.js';
import type { Activation, BmsSettings, ModuleParameters } from '../../src/study/study.js';
import { type OcvCurve, ocvCurve } from './ocv-curve.js';
import type { ReferenceBank } from './reference-bank.js';

/** Constants of one cell and the place of its states: z at `at`, h at `at + 1`, v_k from `at + 2`. */
export interface Cell {
  readonly at: number;
  readonly curve: OcvCurve;
  readonly capacityAs: number;
  readonly resistanceOhm: number;
  readonly pairs: readonly { readonly resistanceOhm: number; readonly timeConstantS: number }[];
  readonly leakageA: number;
  readonly efficiency: number;
  readonly hysteresisV: number;
  readonly hysteresisRate: number;
  readonly arrivalCharge: number;
  readonly activation: Activation | null;
  readonly ageing: ModuleAgeing | null;
  /** Charge fraction that the cold keeps out of reach. */
  readonly floor: number;
}

/** Cells under one BMS: a module, or for native wiring all cells of a string. */
export interface Pack {
  /** Counted from 1. */
  readonly string: number;
  readonly position: number;
  readonly cells: readonly Cell[];
  /** Ohmic resistance of all cells plus the path of the BMS. */
  readonly resistanceOhm: number;
  /** Whose thresholds and draws the BMS has. */
  readonly module: ModuleParameters;
  readonly bms: BmsSettings;
  readonly bleedA: number;
  readonly bleedStartV: number;
  /** By how much it is warmer than ambient, K. */
  readonly offsetK: number;
}

export interface Packs {
  readonly packs: readonly Pack[];
  /** Packs in series in a string. */
  readonly positions: number;
  /** States of all cells. */
  readonly stateLength: number;
}

/** Lays out the packs of a bank as they are when new and at 25 degC, string by string from the negative end. */
export function packsOf(bank: ReferenceBank): Packs {
  const curves = bank.ocvTables.map(ocvCurve);
  const native = bank.candidate.wiring === 'native';
  let at = 0;
  const packs = bank.modules.flatMap((modules, s) => {
    const groups = native ? [modules] : modules.map((module) => [module]);
    return groups.map((group, p): Pack => {
      const cells = group.flatMap((module) =>
        module.capacityAh.map((_, c) => {
          const cell = cellOf(module, c, curves[module.ocv], at);
          at += 2 + cell.pairs.length;
          return cell;
        }),
      );
      const [module] = group;
      const { currentA, startV, ...bleed } = bank.candidate.bleed ?? {};
      return {
        string: s + 1,
        position: p + 1,
        cells,
        resistanceOhm: cells.reduce((sum, cell) => sum + cell.resistanceOhm, module.pathResistanceOhm),
        module,
        bms: { ...module.bms, bleed: { ...module.bms.bleed, ...bleed } },
        bleedA: currentA ?? module.bleedA,
        bleedStartV: startV ?? module.bleedStartV,
        offsetK: (bank.candidate.slotOffsetK?.[s]?.[p] ?? 0) + (module.temperatureOffsetK ?? 0),
      };
    });
  });
  return { packs, positions: native ? 1 : bank.modules[0].length, stateLength: at };
}

function cellOf(module: ModuleParameters, c: number, curve: OcvCurve, at: number): Cell {
  return {
    at,
    curve,
    capacityAs: 3600 * module.capacityAh[c],
    resistanceOhm: module.resistanceOhm[c],
    pairs: module.polarisation.map((pair) => ({
      resistanceOhm: pair.resistanceOhm[c],
      timeConstantS: pair.timeConstantS,
    })),
    leakageA: module.leakageA[c],
    efficiency: module.efficiency[c],
    hysteresisV: module.hysteresisV,
    hysteresisRate: module.hysteresisRate,
    arrivalCharge: module.arrivalCharge[c],
    activation: module.activation ?? null,
    ageing: module.ageing ?? null,
    floor: 0,
  };
}
