import type { AgeingInput } from './ageing.js';
import { DEFAULT_BMS } from './bms.js';
import { DEFAULT_CELL, DEFAULT_POLARISATION } from './cell-model.js';
import { checkSupports } from './check-supports.js';
import { resolveCorrelations } from './correlation.js';
import { gradeLayer } from './grade.js';
import { DEFAULT_GRADE } from './grade-name.js';
import { type Layer, Layers } from './layers.js';
import { resolveLots } from './lots.js';
import type { OcvIndex } from './ocv.js';
import type { OriginSource } from './origin.js';
import { QUANTITIES, type QuantityName } from './quantities.js';
import { QUANTITY_KEYS } from './quantity-keys.js';
import { resolveModuleRatings } from './ratings.js';
import type { Reading } from './reading.js';
import { resolveAgeing, UNAGEING } from './resolve-ageing.js';
import { checkThresholds, resolveBms } from './resolve-bms.js';
import { resolveMeasured } from './resolve-measured.js';
import { type ResolvedSpread, resolveSpread } from './resolve-spread.js';
import type { StockInput } from './stock.js';
import type { CellModel, Correlation, PopulationStock, Spread } from './study.js';
import { renderPath, type StudyPath } from './study-path.js';
import { inUnitOfKey, siFromKey } from './units.js';

/**
 * A population with everything filled in: what its stock writes, what the stocks it is like write, its grade, defaults.
 *
 * @param written layers of the stock itself and of those it is like, the stock itself first
 * @returns undefined after a fault that leaves nothing to go on with
 */
export function resolvePopulation(
  key: string,
  written: readonly Layer<StockInput>[],
  ocv: OcvIndex,
  reading: Reading,
): PopulationStock | undefined {
  const owner: StudyPath = ['stock', key];
  const own = new Layers<Partial<StockInput>>(owner, written);
  const modules = written[0]?.values.modules ?? [];
  const grade = own.pick('grade') ?? { value: DEFAULT_GRADE, source: 'default' as const };
  reading.origins.push({ path: renderPath([...owner, 'grade']), value: grade.value, unit: '', source: grade.source });
  const rated = ratedCapacity(own);
  if (rated === undefined) {
    reading.fault(owner, 'a stock with rated_Ah or a nominal capacity_Ah');
    return undefined;
  }
  const { value: ratedAh, source } = rated;
  reading.origins.push({ path: renderPath([...owner, 'rated_Ah']), value: String(ratedAh), unit: 'Ah', source });
  const cells = own.pick('cells_in_series')?.value ?? DEFAULT_CELL.cells_in_series;
  const layers = own
    .over({ source: `grade ${grade.value}`, path: owner, values: gradeLayer(grade.value, ratedAh, cells) })
    .over({ source: 'default', path: owner, values: { ...DEFAULT_CELL, bms: DEFAULT_BMS } });
  const cellsInSeries = layers.setting('cells_in_series', reading);
  const ofModule = {
    capacityAh: spreadOf(layers, 'capacity_Ah', reading),
    resistanceOhm: spreadOf(layers, 'cell_resistance_mOhm', reading),
    leakagePerMonth: spreadOf(layers, 'leakage_percent_per_month', reading),
    standbyA: spreadOf(layers, 'standby_mA', reading),
    efficiency: spreadOf(layers, 'coulombic_efficiency', reading),
    arrivalCharge: spreadOf(layers, 'arrival_charge_percent', reading),
    pathResistanceOhm: spreadOf(layers, 'path_resistance_mOhm', reading),
    jointResistanceOhm: spreadOf(layers, 'joint_resistance_mOhm', reading),
    temperatureOffsetK: spreadOf(layers, 'temperature_offset_K', reading),
  };
  const correlations = resolveCorrelations(layers, reading);
  const cell = resolveCell(layers, ofModule.resistanceOhm.nominal, ocv, reading);
  const bms = resolveBms(layers.inside('bms'), reading);
  const lots = resolveLots(own, modules, reading);
  const ageing = resolveAgeing(own.inside('ageing') as Layers<AgeingInput>, reading);
  const asSpread = { ...ofModule, ...bms.spreads, ageingRate: ageing?.rate ?? UNAGEING };
  const table = own.pick('measured');
  const measured =
    table && resolveMeasured(table, { owner, moduleIds: modules, cellsInSeries, spreads: asSpread }, reading);
  const resolved = measured?.spreads ?? asSpread;
  checkSupports(owner, resolved, reading, measured?.measured.quantities);
  if (measured !== undefined) {
    checkThresholds(layers.inside('bms'), resolved, reading);
    // One that a grade brings along is nothing that the author counts on.
    const written = own.pick('correlation') === undefined ? [] : correlations;
    warnOfSplitCorrelations(key, written, measured.measured.quantities, reading);
  }
  const ratings = resolveModuleRatings(layers.inside('ratings'), reading);
  return {
    kind: 'population',
    key,
    moduleIds: modules,
    cellsInSeries,
    ratedAh,
    quantities: asQuantities(resolved),
    correlations,
    cell,
    bms: bms.settings,
    ...(lots !== undefined && { lots }),
    ...(measured !== undefined && { measured: measured.measured }),
    ...(ratings && { ratings }),
    ...(ageing && { ageing: ageing.settings }),
  };
}

/** What is measured is not drawn, so nothing that is drawn can follow it. */
function warnOfSplitCorrelations(
  key: string,
  correlations: readonly Correlation[],
  measured: readonly QuantityName[],
  reading: Reading,
): void {
  for (const { level, of } of correlations) {
    if (level === 'cell' || of.every((name) => !measured.includes(name))) continue;
    const [one, other] = of.map((name) => QUANTITY_KEYS[name]);
    reading.warnings.push(
      `stock ${key}: a correlation of ${one} and ${other} at level ${level} has no effect, since not both are drawn`,
    );
  }
}

/** The label's capacity; a stock that tells only its nominal capacity is rated at that. */
function ratedCapacity(
  own: Layers<Partial<StockInput>>,
): { readonly value: number; readonly source: OriginSource } | undefined {
  const rated = own.pick('rated_Ah');
  if (rated !== undefined) return { value: rated.value, source: rated.source };
  for (const { source, values } of own.layers) {
    const capacity = values.capacity_Ah;
    const nominal = typeof capacity === 'number' ? capacity : capacity?.nominal;
    if (nominal !== undefined) return { value: nominal, source };
  }
  return undefined;
}

function resolveCell(
  layers: Layers<Partial<StockInput>>,
  resistanceOhm: number,
  ocv: OcvIndex,
  reading: Reading,
): CellModel {
  const table = layers.setting('ocv', reading);
  const pairs = layers.pick('polarisation') ?? {
    value: DEFAULT_POLARISATION.map(({ ofResistance, timeConstantS }) => ({
      mOhm: inUnitOfKey('mOhm', ofResistance * resistanceOhm),
      tau_s: timeConstantS,
    })),
    source: 'default' as const,
  };
  reading.origins.push({
    path: renderPath([...layers.owner, 'polarisation']),
    value: pairs.value.map(({ mOhm, tau_s }) => `${Number(mOhm.toPrecision(6))} mOhm / ${tau_s} s`).join(', '),
    unit: '',
    source: pairs.source,
  });
  return {
    ocv: ocv.indexOf(table, layers.pick('ocv')?.path ?? layers.owner, reading),
    polarisation: pairs.value.map(({ mOhm, tau_s }) => ({
      resistanceOhm: siFromKey('mOhm', mOhm),
      timeConstantS: tau_s,
    })),
    hysteresisV: layers.si('hysteresis_mV', reading),
    hysteresisRate: layers.si('hysteresis_rate', reading),
    activation: {
      resistanceJPerMol: layers.si('resistance_activation_kJ_per_mol', reading),
      leakageJPerMol: layers.si('leakage_activation_kJ_per_mol', reading),
    },
  };
}

function spreadOf(layers: Layers<Partial<StockInput>>, key: keyof StockInput, reading: Reading): ResolvedSpread {
  const spread = resolveSpread(layers, key, reading);
  if (spread === undefined) throw new RangeError(`no default for ${key}`);
  return spread;
}

/** Spreads in registry order, each with the levels that the sampling room knows. */
function asQuantities(resolved: Readonly<Record<QuantityName, ResolvedSpread>>): Record<QuantityName, Spread> {
  const entries = QUANTITIES.map(({ name }): [QuantityName, Spread] => {
    const { nominal, relative, laws } = resolved[name];
    return [name, { nominal, relative, lot: laws.lot, module: laws.module, cell: laws.cell }];
  });
  return Object.fromEntries(entries) as Record<QuantityName, Spread>;
}
