import { createHash } from 'node:crypto';
import { canonicalJson } from './canonical-json.js';
import { ENGINE } from './engine.js';
import type { Candidate, PopulationStock, Stock, Study } from './study.js';

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
 * candidates, and modules and tables that the candidate does not use.
 */
export function simulationContent(study: Study, candidate: Candidate): Readonly<Record<string, unknown>> {
  const used = new Set(candidate.strings.flat());
  const { key: _key, title: _title, ...options } = candidate;
  const stocks = study.stocks.flatMap((stock) => {
    const content = stockContent(stock, used, study);
    return content === undefined ? [] : [[stock.key, content]];
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
  };
}

/** A stock as far as it is used, its tables written out since their numbers are no identity; undefined if it is not. */
function stockContent(stock: Stock, used: ReadonlySet<string>, study: Study): object | undefined {
  if (stock.kind === 'population') {
    const moduleIds = stock.moduleIds.filter((id) => used.has(id));
    if (moduleIds.length === 0) return undefined;
    const cell = { ...stock.cell, ocv: study.ocvTables[stock.cell.ocv] };
    return { ...stock, moduleIds, cell, ...ofModules(stock, moduleIds) };
  }
  const modules = stock.modules.filter(({ id }) => used.has(id));
  if (modules.length === 0) return undefined;
  return { ...stock, modules: modules.map((module) => ({ ...module, ocv: study.ocvTables[module.ocv] })) };
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
