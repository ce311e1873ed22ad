import type { ModuleAgeing } from '../study/ageing-settings.js';
import type { BleedOverride, Candidate, ModuleParameters } from '../study/study.js';
import { sumChains } from './chain-sums.js';
import { type ChainedWiring, chainWiring } from './chains.js';
import { type BankEqualiser, moduleOhm, placeEqualisers } from './equaliser.js';
import type { OcvCurves } from './ocv-curves.js';
import { type PlacedCell, type PlacedModule, placeModule, rehouse } from './placed-module.js';
import { type BankTemperature, bankTemperature } from './temperature.js';
import { wireCandidate } from './wiring-graph.js';

export const BLEED_NONE = 0;
export const BLEED_EACH = 1;
export const BLEED_ABOVE_LOWEST = 2;

/**
 * One bank as flat arrays: everything about it that time does not change while its modules keep their temperatures.
 *
 * Modules are numbered string by string from the negative end, cells module by module from the negative end. Values of a
 * cell are at its number, of a module at its number; `polarisationOhm` is pair by pair (pair * cells + cell).
 */
export interface Bank {
  readonly strings: number;
  readonly positions: number;
  readonly modules: number;
  readonly cells: number;
  readonly wiring: ChainedWiring;
  readonly ocv: OcvCurves;
  /** Rated capacity of the bank: smallest of each string, summed. */
  readonly ratedAh: number;
  /** Rated capacity that drift is a fraction of: the largest rated capacity of a module. */
  readonly driftRatedAh: number;

  readonly moduleOfCell: Int32Array;
  readonly curveOfCell: Int32Array;
  readonly capacityAs: Float64Array;
  readonly resistanceOhm: Float64Array;
  readonly hysteresisV: Float64Array;
  /** Plett's gamma over the capacity in As. */
  readonly hysteresisPerAs: Float64Array;
  readonly leakageA: Float64Array;
  readonly efficiency: Float64Array;
  readonly arrivalCharge: Float64Array;
  /** Distinct time constants of all modules, s. */
  readonly timeConstantS: Float64Array;
  readonly polarisationOhm: Float64Array;

  /** First cell of each module, and the number of cells at the end. */
  readonly cellStart: Int32Array;
  readonly chainOfModule: Int32Array;
  /** First cell of each chain, and the number of cells at the end: the cells of a chain stand in a row. */
  readonly chainCellStart: Int32Array;
  readonly pathOhm: Float64Array;
  readonly standbyA: Float64Array;
  readonly asleepA: Float64Array;
  readonly overVoltageV: Float64Array;
  readonly overVoltageReleaseV: Float64Array;
  readonly underVoltageV: Float64Array;
  readonly underVoltageReleaseV: Float64Array;
  readonly overCurrentChargeA: Float64Array;
  readonly overCurrentDischargeA: Float64Array;
  readonly bleedRule: Uint8Array;
  readonly bleedWhileChargingOnly: Uint8Array;
  readonly bleedA: Float64Array;
  readonly bleedStartV: Float64Array;
  readonly bleedStopV: Float64Array;
  readonly bleedDeltaV: Float64Array;
  readonly underVoltageReleaseOnCharge: Uint8Array;
  readonly overCurrentOpensBoth: Uint8Array;
  readonly lockIsManual: Uint8Array;
  readonly forwardDropV: Float64Array;
  /** `Infinity` where the drop is never bridged. */
  readonly recloseA: Float64Array;
  readonly placed: readonly PlacedModule[];
  readonly temperature: BankTemperature;

  /** Sum over the modules of a chain of all resistances, leads included. */
  readonly chainOhm: Float64Array;
  /** Sum over the cells of a chain, pair by pair (pair * chains + chain). */
  readonly chainPolarisationOhm: Float64Array;
  /** Smallest cell capacity of a chain. */
  readonly chainCapacityAs: Float64Array;
  /** Sum of the hysteresis voltages of the cells of a chain. */
  readonly chainHysteresisV: Float64Array;
  /** Bound on what the current through a cell of a chain lacks to that of the chain: standby and bleed. */
  readonly chainMostOffsetA: Float64Array;
  /** Any cell has hysteresis: otherwise its exponentials are left out. */
  readonly hasHysteresis: boolean;
  /** Null without: then nothing about it is looked at. */
  readonly equaliser: BankEqualiser | null;
  /** Of each cell, undefined where it does not age; null if none does: then nothing about it is looked at. */
  readonly ageing: readonly (ModuleAgeing | undefined)[] | null;
}

/**
 * Builds the bank of a candidate from the modules of one instance.
 *
 * @param moduleNamed parameters of each module id that the candidate uses
 */
export function buildBank(
  candidate: Candidate,
  moduleNamed: ReadonlyMap<string, ModuleParameters>,
  ocv: OcvCurves,
): Bank {
  const placed = candidate.strings.map((ids) => {
    const string = ids.map((id) => {
      const parameters = moduleNamed.get(id);
      if (parameters === undefined) throw new RangeError(`module ${id} must be in a stock`);
      return placeModule(withBleed(parameters, candidate.bleed));
    });
    return candidate.wiring === 'native' ? [rehouse(string)] : string;
  });
  const list = placed.flat();
  const cellList = list.flatMap((module) => module.cells);
  const wiring = chainWiring(wireCandidate(candidate));
  const cells = cellList.length;

  const cellStart = new Int32Array(list.length + 1);
  const moduleOfCell = new Int32Array(cells);
  list.forEach((module, m) => {
    cellStart[m + 1] = cellStart[m] + module.cells.length;
    moduleOfCell.fill(m, cellStart[m], cellStart[m + 1]);
  });
  const ofCells = (pick: (cell: PlacedCell) => number): Float64Array => Float64Array.from(cellList, pick);
  const ofModules = (pick: (module: ModuleParameters) => number): Float64Array =>
    Float64Array.from(list, ({ parameters }) => pick(parameters));
  const flags = (pick: (module: ModuleParameters) => number): Uint8Array => Uint8Array.from(ofModules(pick));

  const timeConstants = [...new Set(cellList.flatMap((cell) => cell.polarisation.map((pair) => pair.timeConstantS)))];
  const polarisationOhm = new Float64Array(timeConstants.length * cells);
  cellList.forEach((cell, c) => {
    for (const pair of cell.polarisation) {
      polarisationOhm[timeConstants.indexOf(pair.timeConstantS) * cells + c] += pair.resistanceOhm;
    }
  });
  const chainOfModule = new Int32Array(list.length);
  wiring.chains.forEach((chain, i) => {
    for (const m of chain.modules) chainOfModule[m] = i;
  });
  const resistanceOhm = ofCells((cell) => cell.resistanceOhm);
  const capacityAs = ofCells((cell) => 3600 * cell.capacityAh);
  const count = wiring.chains.length;
  const chainCapacityAs = new Float64Array(count).fill(Number.POSITIVE_INFINITY);
  for (let c = 0; c < cells; c++) {
    const i = chainOfModule[moduleOfCell[c]];
    chainCapacityAs[i] = Math.min(chainCapacityAs[i], capacityAs[c]);
  }
  const hysteresisV = ofCells((cell) => cell.hysteresisV);
  const chainHysteresisV = new Float64Array(count);
  for (let c = 0; c < cells; c++) chainHysteresisV[chainOfModule[moduleOfCell[c]]] += hysteresisV[c];
  const chainMostOffsetA = new Float64Array(count);
  list.forEach(({ parameters: { standbyA, bms, bleedA } }, m) => {
    const i = chainOfModule[m];
    chainMostOffsetA[i] = Math.max(chainMostOffsetA[i], Math.max(standbyA, bms.asleepA) + bleedA);
  });
  const pathOhm = ofModules((module) => module.pathResistanceOhm);
  const sums = sumChains({ wiring, moduleOfCell, chainOfModule, pathOhm, resistanceOhm, polarisationOhm });
  return {
    strings: placed.length,
    positions: placed[0].length,
    modules: list.length,
    cells,
    wiring,
    ocv,
    ratedAh: placed.reduce((sum, string) => sum + Math.min(...string.map(ratedAh)), 0),
    driftRatedAh: Math.max(...list.map(ratedAh)),
    moduleOfCell,
    curveOfCell: Int32Array.from(cellList, (cell) => cell.ocv),
    capacityAs,
    resistanceOhm,
    hysteresisV,
    hysteresisPerAs: ofCells((cell) => cell.hysteresisRate / (3600 * cell.capacityAh)),
    leakageA: ofCells((cell) => cell.leakageA),
    efficiency: ofCells((cell) => cell.efficiency),
    arrivalCharge: ofCells((cell) => cell.arrivalCharge),
    timeConstantS: Float64Array.from(timeConstants),
    polarisationOhm,
    cellStart,
    chainOfModule,
    chainCellStart: Int32Array.from([...wiring.chains.map(({ modules }) => cellStart[modules[0]]), cells]),
    pathOhm,
    standbyA: ofModules((module) => module.standbyA),
    asleepA: ofModules(({ bms }) => bms.asleepA),
    overVoltageV: ofModules((module) => module.overVoltageV),
    overVoltageReleaseV: ofModules((module) => module.overVoltageReleaseV),
    underVoltageV: ofModules((module) => module.underVoltageV),
    underVoltageReleaseV: ofModules((module) => module.underVoltageReleaseV),
    overCurrentChargeA: ofModules((module) => module.overCurrentChargeA),
    overCurrentDischargeA: ofModules((module) => module.overCurrentDischargeA),
    bleedRule: flags(({ bms }) => ['none', 'each', 'above-lowest'].indexOf(bms.bleed.rule)),
    bleedWhileChargingOnly: flags(({ bms }) => (bms.bleed.when === 'charging' ? 1 : 0)),
    bleedA: ofModules((module) => module.bleedA),
    bleedStartV: ofModules((module) => module.bleedStartV),
    bleedStopV: ofModules((module) => module.bleedStartV - module.bms.bleed.stopBelowStartV),
    bleedDeltaV: ofModules((module) => module.bms.bleed.deltaV),
    underVoltageReleaseOnCharge: flags(({ bms }) => (bms.underVoltageReleaseOnCharge ? 1 : 0)),
    lockIsManual: flags(({ bms }) => (bms.overCurrent.lock === 'manual' ? 1 : 0)),
    overCurrentOpensBoth: flags(({ bms }) => (bms.overCurrent.opens === 'both' ? 1 : 0)),
    forwardDropV: ofModules(({ bms }) => bms.forwardDropV),
    recloseA: ofModules(({ bms }) => bms.recloseA ?? Number.POSITIVE_INFINITY),
    placed: list,
    temperature: bankTemperature(candidate, placed),
    ...sums,
    chainCapacityAs,
    chainHysteresisV,
    chainMostOffsetA,
    hasHysteresis: hysteresisV.some((volts) => volts !== 0),
    equaliser:
      candidate.equaliser === undefined
        ? null
        : placeEqualisers(
            candidate.equaliser,
            placed.length,
            placed[0].length,
            cellStart[placed[0].length],
            moduleOhm(wiring, sums.chainOhm),
          ),
    ageing: cellList.some(({ ageing }) => ageing !== undefined) ? cellList.map(({ ageing }) => ageing) : null,
  };
}

const ratedAh = (module: PlacedModule): number => module.parameters.ratedAh;

/** The module with the bleed of a candidate instead of its own, key by key. */
function withBleed(module: ModuleParameters, bleed: BleedOverride | null): ModuleParameters {
  if (bleed === null) return module;
  return {
    ...module,
    bleedA: bleed.currentA ?? module.bleedA,
    bleedStartV: bleed.startV ?? module.bleedStartV,
    bms: {
      ...module.bms,
      bleed: {
        rule: bleed.rule ?? module.bms.bleed.rule,
        when: bleed.when ?? module.bms.bleed.when,
        stopBelowStartV: bleed.stopBelowStartV ?? module.bms.bleed.stopBelowStartV,
        deltaV: bleed.deltaV ?? module.bms.bleed.deltaV,
      },
    },
  };
}
