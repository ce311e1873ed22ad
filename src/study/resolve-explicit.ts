import type { AgeingInput } from './ageing.js';
import { type BmsInput, DEFAULT_BMS } from './bms.js';
import { DEFAULT_CELL, DEFAULT_POLARISATION } from './cell-model.js';
import type { ExplicitModuleInput, ExplicitStockInput } from './explicit-module.js';
import { gradeLayer, NOMINAL_OVER_VOLTAGE_V, NOMINAL_UNDER_VOLTAGE_V } from './grade.js';
import { DEFAULT_GRADE } from './grade-name.js';
import { type Layer, Layers } from './layers.js';
import type { OcvIndex } from './ocv.js';
import { resolveModuleRatings } from './ratings.js';
import type { Reading } from './reading.js';
import { resolveAgeing } from './resolve-ageing.js';
import { resolveBms } from './resolve-bms.js';
import { showValue } from './show-value.js';
import type { ExplicitStock, ModuleParameters } from './study.js';
import { renderPath, type StudyPath } from './study-path.js';
import { leakageAFromMonth, siFromKey } from './units.js';

type ModuleLayers = Layers<ExplicitModuleInput>;

/** @returns the stock with every module that could be resolved; faults go to `reading` */
export function resolveExplicit(
  key: string,
  stock: ExplicitStockInput,
  ocv: OcvIndex,
  reading: Reading,
): ExplicitStock {
  const modules: ModuleParameters[] = [];
  for (const [id, values] of Object.entries(stock.modules)) {
    const owner: StudyPath = ['stock', key, 'modules', id];
    const written: Layer<ExplicitModuleInput>[] = [{ source: 'study', path: owner, values }];
    if (stock.defaults !== undefined) {
      written.push({ source: 'study', path: ['stock', key, 'defaults'], values: stock.defaults });
    }
    const module = resolveModule(id, key, new Layers(owner, written), ocv, reading);
    if (module !== undefined) modules.push(module);
  }
  return { kind: 'explicit', key, modules };
}

function resolveModule(
  id: string,
  stock: string,
  written: ModuleLayers,
  ocv: OcvIndex,
  reading: Reading,
): ModuleParameters | undefined {
  const cells = written.pick('cells_in_series')?.value ?? DEFAULT_CELL.cells_in_series;
  const capacityAh = cellValues(written, 'capacity_Ah', cells, reading);
  if (capacityAh === undefined) {
    const isSetAside = reading.isIncomplete(['stock', stock, 'defaults']);
    if (written.pick('capacity_Ah') === undefined && !isSetAside) {
      reading.fault(written.owner, 'a module with its capacity_Ah');
    }
    return undefined;
  }
  const ratedAh = written.pick('rated_Ah')?.value ?? meanOf(capacityAh);
  const defaults = defaultModule(ratedAh, cells);
  const layers = written.over({ source: 'default', path: written.owner, values: defaults });
  const resistanceOhm = cellValues(layers, 'cell_resistance_mOhm', cells, reading) ?? [];
  const table = layers.setting('ocv', reading);
  const ofModule = {
    id,
    stock,
    ratedAh: layers.si('rated_Ah', reading),
    ocv: ocv.indexOf(table, layers.pick('ocv')?.path ?? layers.owner, reading),
    hysteresisV: layers.si('hysteresis_mV', reading),
    hysteresisRate: layers.si('hysteresis_rate', reading),
    capacityAh,
    resistanceOhm,
    polarisation: polarisationOf(layers, resistanceOhm, reading),
    leakageA: leakageOf(written, layers, capacityAh, reading),
    efficiency: cellValues(layers, 'coulombic_efficiency', cells, reading) ?? [],
    arrivalCharge: cellValues(layers, 'arrival_charge_percent', cells, reading) ?? [],
    pathResistanceOhm: layers.si('path_resistance_mOhm', reading) + layers.si('joint_resistance_mOhm', reading),
    standbyA: layers.si('standby_mA', reading),
    activation: {
      resistanceJPerMol: layers.si('resistance_activation_kJ_per_mol', reading),
      leakageJPerMol: layers.si('leakage_activation_kJ_per_mol', reading),
    },
    temperatureOffsetK: layers.si('temperature_offset_K', reading),
  };
  const ratings = resolveModuleRatings(layers.inside('ratings'), reading);
  const bms = resolveBms(layers.inside('bms') as Layers<BmsInput>, reading);
  const ageing = resolveAgeing(written.inside('ageing') as Layers<AgeingInput>, reading);
  return {
    ...ofModule,
    overVoltageV: bms.spreads.overVoltageV.nominal,
    overVoltageReleaseV: bms.spreads.overVoltageReleaseV.nominal,
    underVoltageV: bms.spreads.underVoltageV.nominal,
    underVoltageReleaseV: bms.spreads.underVoltageReleaseV.nominal,
    overCurrentChargeA: bms.spreads.overCurrentChargeA.nominal,
    overCurrentDischargeA: bms.spreads.overCurrentDischargeA.nominal,
    bleedA: bms.spreads.bleedA.nominal,
    bleedStartV: bms.spreads.bleedStartV.nominal,
    bms: bms.settings,
    ...(ratings && { ratings }),
    ...(ageing && { ageing: { ...ageing.settings, rate: ageing.rate.nominal } }),
  };
}

/** What a module written down has unless it says otherwise: the nominal values of the default grade. */
function defaultModule(ratedAh: number, cells: 4 | 8 | 16): ExplicitModuleInput {
  const grade = gradeLayer(DEFAULT_GRADE, ratedAh, cells);
  const nominal = (spread: number | { nominal?: number | undefined } | undefined): number | undefined =>
    typeof spread === 'number' ? spread : spread?.nominal;
  return {
    ...DEFAULT_CELL,
    cells_in_series: cells,
    rated_Ah: ratedAh,
    cell_resistance_mOhm: nominal(grade.cell_resistance_mOhm),
    leakage_percent_per_month: nominal(grade.leakage_percent_per_month),
    standby_mA: nominal(grade.standby_mA),
    coulombic_efficiency: nominal(grade.coulombic_efficiency),
    arrival_charge_percent: nominal(grade.arrival_charge_percent),
    path_resistance_mOhm: nominal(grade.path_resistance_mOhm),
    joint_resistance_mOhm: nominal(grade.joint_resistance_mOhm),
    bms: {
      ...DEFAULT_BMS,
      over_voltage: { ...DEFAULT_BMS.over_voltage, cell_V: NOMINAL_OVER_VOLTAGE_V },
      under_voltage: { ...DEFAULT_BMS.under_voltage, cell_V: NOMINAL_UNDER_VOLTAGE_V },
    },
  };
}

type CellKey =
  | 'capacity_Ah'
  | 'cell_resistance_mOhm'
  | 'leakage_percent_per_month'
  | 'leakage_mA'
  | 'coulombic_efficiency'
  | 'arrival_charge_percent';

/** @returns one value per cell in the units of the resolved study; undefined if there is none or not one per cell */
function cellValues(
  layers: ModuleLayers,
  key: CellKey,
  cells: number,
  reading: Reading,
): readonly number[] | undefined {
  const picked = layers.pick(key);
  if (picked === undefined) return undefined;
  layers.setting(key, reading);
  return oneForEachCell(picked.value, key, cells, picked.path, reading);
}

function oneForEachCell(
  value: number | readonly number[],
  key: string,
  cells: number,
  path: StudyPath,
  reading: Reading,
): readonly number[] | undefined {
  const list = typeof value === 'number' ? Array<number>(cells).fill(value) : value;
  if (list.length === cells) return list.map((item) => siFromKey(key, item));
  reading.fault(path, `a list of ${cells} values, one per cell`);
  return undefined;
}

function polarisationOf(
  layers: ModuleLayers,
  resistanceOhm: readonly number[],
  reading: Reading,
): ModuleParameters['polarisation'] {
  const pairs = layers.pick('polarisation');
  const words = pairs?.value.map(({ mOhm, tau_s }) => `${showValue(mOhm)} mOhm / ${tau_s} s`);
  const shares = DEFAULT_POLARISATION.map(
    ({ ofResistance, timeConstantS }) => `${ofResistance} of the cell resistance / ${timeConstantS} s`,
  );
  reading.origins.push({
    path: renderPath([...layers.owner, 'polarisation']),
    value: (words ?? shares).join(', ') || 'none',
    unit: '',
    source: pairs?.source ?? 'default',
  });
  if (pairs === undefined) {
    return DEFAULT_POLARISATION.map(({ ofResistance, timeConstantS }) => ({
      timeConstantS,
      resistanceOhm: resistanceOhm.map((ohm) => ofResistance * ohm),
    }));
  }
  return pairs.value.map(({ mOhm, tau_s }, index) => ({
    timeConstantS: tau_s,
    resistanceOhm: oneForEachCell(mOhm, 'mOhm', resistanceOhm.length, [...pairs.path, index, 'mOhm'], reading) ?? [],
  }));
}

/** Leakage is written as a current or as a share of capacity per month; the module's own word wins over the defaults. */
function leakageOf(
  written: ModuleLayers,
  layers: ModuleLayers,
  capacityAh: readonly number[],
  reading: Reading,
): readonly number[] {
  const ownsCurrent = written.layers.find(
    ({ values }) => values.leakage_mA !== undefined || values.leakage_percent_per_month !== undefined,
  );
  if (ownsCurrent?.values.leakage_mA !== undefined) {
    return cellValues(layers, 'leakage_mA', capacityAh.length, reading) ?? [];
  }
  const perMonth = cellValues(layers, 'leakage_percent_per_month', capacityAh.length, reading) ?? [];
  return perMonth.map((fraction, index) => leakageAFromMonth(fraction, capacityAh[index] ?? 0));
}

function meanOf(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
