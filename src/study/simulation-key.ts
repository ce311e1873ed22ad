import { createHash } from 'node:crypto';
import { canonicalJson } from './canonical-json.js';
import { ENGINE } from './engine.js';
import { leavesReference } from './leaves-reference.js';
import type { Candidate, PopulationStock, SobolColumn, Stock, Study } from './study.js';

/**
 * Identity of the outcomes of a candidate: SHA-256 of the canonical JSON of `simulationContent`.
 *
 * @returns 64 hexadecimal digits
 */
export function simulationKey(study: Study, candidate: Candidate): string {
  return createHash('sha256')
    .update(canonicalJson(simulationContent(study, candidate)))
    .digest('hex');
}

/**
 * All that fixes the outcomes of a candidate, as plain data.
 *
 * Left out is what does not: titles, the candidate's name, acceptance lines, confidence, the number of instances, other
 * candidates, modules and tables that the candidate does not use, and how its modules follow a temperature that stays
 * at 25 degC. Under the plan `sobol` further modules may move the columns of these, and so change what is drawn.
 */
export function simulationContent(study: Study, candidate: Candidate): Readonly<Record<string, unknown>> {
  const used = new Set(candidate.strings.flat());
  const { key: _key, title: _title, ...options } = candidate;
  const isWarmed = leavesReference(study, candidate);
  const stocks = study.stocks.flatMap((stock) => {
    const content = stockContent(stock, used, study, isWarmed);
    return content === undefined ? [] : [[stock.key, content] as const];
  });
  return {
    format: study.format,
    engine: ENGINE,
    seed: study.seed,
    blockSize: study.blockSize,
    plan: study.plan,
    cycles: study.cycles,
    driftLimitFraction: study.driftLimitFraction,
    stocks: Object.fromEntries(stocks),
    duty: study.duty,
    candidate: options,
    ...(study.sobolColumns && { sobolColumns: usedColumns(study.sobolColumns, stocks, used) }),
  };
}

/** Columns of what is used, by their numbers. */
function usedColumns(
  columns: readonly SobolColumn[],
  stocks: readonly (readonly [string, object])[],
  modules: ReadonlySet<string>,
): Readonly<Record<string, SobolColumn>> {
  const isUsed = ({ stock, module }: SobolColumn): boolean =>
    (module === null || modules.has(module)) && (stock === null || stocks.some(([key]) => key === stock));
  return Object.fromEntries(
    columns.map((column, number) => [number, column] as const).filter(([, one]) => isUsed(one)),
  );
}

/** A stock as far as it is used, its tables written out since their numbers are no identity; undefined if it is not. */
function stockContent(stock: Stock, used: ReadonlySet<string>, study: Study, isWarmed: boolean): object | undefined {
  if (stock.kind === 'population') {
    const moduleIds = stock.moduleIds.filter((id) => used.has(id));
    if (moduleIds.length === 0) return undefined;
    const { cellsDrawnAs, ...rest } = stock;
    const { cell, quantities } = asFarAsItMatters(stock, isWarmed);
    const drawnAs = Object.entries(cellsDrawnAs ?? {}).filter(([id]) => used.has(id));
    return {
      ...rest,
      moduleIds,
      quantities,
      cell: { ...cell, ocv: study.ocvTables[cell.ocv] },
      // Left out where there are none, so that keys of studies without them stay as they were.
      ...(drawnAs.length > 0 && { cellsDrawnAs: Object.fromEntries(drawnAs) }),
      ...ofModules(stock, moduleIds),
    };
  }
  const modules = stock.modules.filter(({ id }) => used.has(id));
  if (modules.length === 0) return undefined;
  return {
    ...stock,
    modules: modules.map((module) => {
      const { activation, temperatureOffsetK, ...rest } = module;
      const warmed = isWarmed ? { activation, temperatureOffsetK } : {};
      return { ...rest, ...warmed, ocv: study.ocvTables[module.ocv] };
    }),
  };
}

/**
 * A population without how it follows temperature if no module leaves 25 degC, without a rate of ageing if none ages, and
 * without spreads of the temperatures of refusal if there are none: the settings of its BMS tell these.
 */
function asFarAsItMatters(
  stock: PopulationStock,
  isWarmed: boolean,
): { readonly cell: object & { ocv: number }; readonly quantities: object } {
  const { activation: _activation, ...cell } = stock.cell;
  const { temperatureOffsetK, ageingRate, refusalBelowK, refusalReleaseK, ...quantities } = stock.quantities;
  const refusalSpreads = [refusalBelowK, refusalReleaseK].some(
    ({ lot, module }) => lot.law !== 'fixed' || module.law !== 'fixed',
  );
  return {
    cell: isWarmed ? stock.cell : cell,
    quantities: {
      ...quantities,
      ...(isWarmed && { temperatureOffsetK }),
      ...(stock.ageing !== undefined && { ageingRate }),
      ...(isWarmed && refusalSpreads && { refusalBelowK, refusalReleaseK }),
    },
  };
}

/** What a stock says of single modules, as far as these are used. */
function ofModules({ lots, measured }: PopulationStock, moduleIds: readonly string[]): Partial<PopulationStock> {
  const used = <V>(values: Readonly<Record<string, V>>): Record<string, V> =>
    Object.fromEntries(Object.entries(values).filter(([id]) => moduleIds.includes(id)));
  return {
    ...(lots?.kind === 'by-name' && { lots: { ...lots, lotOf: used(lots.lotOf) } }),
    ...(measured?.rows === 'of-each-module' && { measured: { ...measured, valuesOf: used(measured.valuesOf) } }),
  };
}
