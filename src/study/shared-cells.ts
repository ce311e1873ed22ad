import { didYouMean } from './nearest-name.js';
import type { Reading } from './reading.js';
import type { StockInput } from './stock.js';
import type { DrawnCell, PopulationStock, Stock } from './study.js';

/**
 * A stock of packs whose cells take the draws of the modules that `cells_drawn_as` names, cell k of a pack those of the
 * k-th cell along them: a string of modules and a pack then differ by lot, module and BMS, not by the luck of each cell.
 *
 * @param written the stock as the study has it; what a stock is like is not asked, since modules are named once
 */
export function shareCellDraws(
  stock: Stock,
  written: { readonly modules: unknown; readonly cells_drawn_as?: StockInput['cells_drawn_as'] } | undefined,
  stocks: readonly Stock[],
  reading: Reading,
): Stock {
  const packs = Object.entries(written?.cells_drawn_as ?? {});
  if (stock.kind === 'explicit' || packs.length === 0) return stock;
  const path = ['stock', stock.key, 'cells_drawn_as'];
  const taken = new Set<string>();
  const cellsDrawnAs: Record<string, readonly DrawnCell[]> = {};
  for (const [pack, modules] of packs) {
    if (!stock.moduleIds.includes(pack)) {
      const names = stock.moduleIds.join(', ');
      reading.faultWith([...path, pack], `must be named as a module of this stock (${names}), got "${pack}"`);
      continue;
    }
    const cells = modules.map((id, index) => {
      const at = [...path, pack, index];
      if (taken.has(id)) reading.fault(at, 'a module that stands once in cells_drawn_as');
      taken.add(id);
      return cellsOf(id, sourcesFor(stock, stocks, reading), stocks, at, reading);
    });
    const count = cells.flat().length;
    if (count !== stock.cellsInSeries && cells.every(({ length }) => length > 0)) {
      reading.faultWith([...path, pack], `must be modules of ${stock.cellsInSeries} cells together, got ${count}`);
    }
    cellsDrawnAs[pack] = cells.flat();
    reading.origins.push({
      path: ['stock', stock.key, 'cells_drawn_as', pack].join('.'),
      value: modules.join(', '),
      unit: '',
      source: 'study',
    });
  }
  return { ...stock, cellsDrawnAs };
}

/** Stocks whose cells draw for themselves: draws are never handed on twice. */
function sourcesFor(stock: Stock, stocks: readonly Stock[], reading: Reading): readonly PopulationStock[] {
  return stocks.flatMap((other) => {
    const handsOn = reading.written(['stock', other.key, 'cells_drawn_as']) !== undefined;
    return other.kind === 'population' && other.key !== stock.key && !handsOn ? [other] : [];
  });
}

/** @returns none after a fault */
function cellsOf(
  id: string,
  sources: readonly PopulationStock[],
  stocks: readonly Stock[],
  at: readonly (string | number)[],
  reading: Reading,
): readonly DrawnCell[] {
  const home = sources.find(({ moduleIds }) => moduleIds.includes(id));
  if (home === undefined) {
    const names = sources.flatMap(({ moduleIds }) => moduleIds);
    // A module that is there but draws nothing, or for itself, is no mistyped name.
    const isThere = stocks.some((stock) =>
      stock.kind === 'population' ? stock.moduleIds.includes(id) : stock.modules.some((module) => module.id === id),
    );
    reading.fault(at, 'a module of another stock that draws its own cells', isThere ? '' : didYouMean(id, names));
    return [];
  }
  return Array.from({ length: home.cellsInSeries }, (_, k) => ({ stock: home.key, module: id, cell: k + 1 }));
}
