import type { QuantityName } from './quantities.js';
import type { Candidate, PopulationStock, Stock, Study } from './study.js';

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
  /** By how much the module is warmer than its slot, K. */
  readonly temperatureOffsetK: number;
  /** Its BMS does not let it be charged below some temperature. */
  readonly refusesCold: boolean;
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
    return stock.moduleIds.map((id) => ({
      id,
      stock: stock.key,
      cells: stock.cellsInSeries,
      ratedAh: stock.ratedAh,
      capacityAh: nominalOf(stock, id, 'capacityAh'),
      arrivalCharge: nominalOf(stock, id, 'arrivalCharge'),
      resistanceOhm: nominalOf(stock, id, 'resistanceOhm'),
      overVoltageV: nominalOf(stock, id, 'overVoltageV'),
      overVoltageReleaseV: nominalOf(stock, id, 'overVoltageReleaseV'),
      underVoltageV: nominalOf(stock, id, 'underVoltageV'),
      underVoltageReleaseV: nominalOf(stock, id, 'underVoltageReleaseV'),
      overCurrentChargeA: nominalOf(stock, id, 'overCurrentChargeA'),
      overCurrentDischargeA: nominalOf(stock, id, 'overCurrentDischargeA'),
      temperatureOffsetK: nominalOf(stock, id, 'temperatureOffsetK'),
      refusesCold: stock.bms.chargeRefusal !== undefined,
    }));
  }
  return stock.modules.map((module) => ({
    ...module,
    stock: stock.key,
    cells: module.capacityAh.length,
    capacityAh: Math.min(...module.capacityAh),
    arrivalCharge: Math.min(...module.arrivalCharge),
    resistanceOhm: Math.max(...module.resistanceOhm),
    temperatureOffsetK: module.temperatureOffsetK ?? 0,
    refusesCold: module.bms.chargeRefusal !== undefined,
  }));
}

/** What a module is measured to have, else the nominal value of its stock. */
function nominalOf({ quantities, measured }: PopulationStock, id: string, name: QuantityName): number {
  const place = measured?.quantities.indexOf(name) ?? -1;
  const own = measured?.rows === 'of-each-module' ? measured.valuesOf[id]?.[place] : undefined;
  return own ?? quantities[name].nominal;
}
