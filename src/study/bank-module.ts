import type { Candidate, Stock, Study } from './study.js';

/** Nominal values of a module that rules and warnings compare with the bank it stands in. */
export interface NominalModule {
  readonly id: string;
  readonly stock: string;
  readonly cells: number;
  readonly ratedAh: number;
  /** Of a cell, the smallest. */
  readonly capacityAh: number;
  /** Charge fraction as received, of a cell, the smallest. */
  readonly arrivalCharge: number;
  /** Of a cell, the largest. */
  readonly resistanceOhm: number;
  readonly overVoltageV: number;
  readonly overVoltageReleaseV: number;
  readonly underVoltageV: number;
  readonly underVoltageReleaseV: number;
  readonly overCurrentChargeA: number;
  readonly overCurrentDischargeA: number;
}

/** @returns the modules of a candidate with their nominal values, string by string */
export function nominalModules(study: Study, candidate: Candidate): readonly (readonly NominalModule[])[] {
  const byId = new Map(study.stocks.flatMap(modulesOf).map((module) => [module.id, module]));
  return candidate.strings.map((ids) =>
    ids.flatMap((id) => {
      const module = byId.get(id);
      return module === undefined ? [] : [module];
    }),
  );
}

function modulesOf(stock: Stock): readonly NominalModule[] {
  if (stock.kind === 'population') {
    const { quantities } = stock;
    return stock.moduleIds.map((id) => ({
      id,
      stock: stock.key,
      cells: stock.cellsInSeries,
      ratedAh: stock.ratedAh,
      capacityAh: quantities.capacityAh.nominal,
      arrivalCharge: quantities.arrivalCharge.nominal,
      resistanceOhm: quantities.resistanceOhm.nominal,
      overVoltageV: quantities.overVoltageV.nominal,
      overVoltageReleaseV: quantities.overVoltageReleaseV.nominal,
      underVoltageV: quantities.underVoltageV.nominal,
      underVoltageReleaseV: quantities.underVoltageReleaseV.nominal,
      overCurrentChargeA: quantities.overCurrentChargeA.nominal,
      overCurrentDischargeA: quantities.overCurrentDischargeA.nominal,
    }));
  }
  return stock.modules.map((module) => ({
    ...module,
    stock: stock.key,
    cells: module.capacityAh.length,
    capacityAh: Math.min(...module.capacityAh),
    arrivalCharge: Math.min(...module.arrivalCharge),
    resistanceOhm: Math.max(...module.resistanceOhm),
  }));
}
