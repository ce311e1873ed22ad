import type { z } from 'zod';
import type { Layer } from './layers.js';
import { didYouMean } from './nearest-name.js';
import type { OcvIndex } from './ocv.js';
import type { OriginSource } from './origin.js';
import type { Reading } from './reading.js';
import { resolveExplicit } from './resolve-explicit.js';
import { resolvePopulation } from './resolve-population.js';
import { shareCellDraws } from './shared-cells.js';
import type { StockInput } from './stock.js';
import { isPopulation, type STOCKS } from './stocks.js';
import type { Stock } from './study.js';

type StocksInput = z.infer<typeof STOCKS>;

/** @returns the stocks that could be resolved, in the order of the study; faults go to `reading` */
export function resolveStocks(input: StocksInput, ocv: OcvIndex, reading: Reading): readonly Stock[] {
  const stocks: Stock[] = [];
  const owners = new Map<string, string>();
  for (const [key, written] of Object.entries(input)) {
    checkModuleNames(key, written.modules, owners, reading);
    if (isPopulation(written)) {
      const layers = likeLayers(key, written, input, reading);
      const stock = layers && resolvePopulation(key, layers, ocv, reading);
      if (stock !== undefined) stocks.push(stock);
    } else stocks.push(resolveExplicit(key, written, ocv, reading));
  }
  return stocks.map((stock) => shareCellDraws(stock, input[stock.key], stocks, reading));
}

/** A module's name is its identity: it draws its values by it, so it stands once in a study. */
function checkModuleNames(
  stock: string,
  modules: readonly string[] | Readonly<Record<string, unknown>>,
  owners: Map<string, string>,
  reading: Reading,
): void {
  const ids = Array.isArray(modules) ? modules : Object.keys(modules);
  for (const [index, id] of ids.entries()) {
    const owner = owners.get(id);
    const path = ['stock', stock, 'modules', Array.isArray(modules) ? index : id];
    if (owner !== undefined) {
      reading.faultWith(path, `must be a module named once in the study, got "${id}", which is in stock ${owner} too`);
    }
    owners.set(id, stock);
  }
}

/** The layers of a stock: itself, the stock it is like, the one that is like, and so on; undefined after a fault. */
function likeLayers(
  key: string,
  stock: StockInput,
  input: StocksInput,
  reading: Reading,
): readonly Layer<StockInput>[] | undefined {
  const layers: Layer<StockInput>[] = [];
  const seen = new Set<string>();
  let name = key;
  let values = stock;
  for (;;) {
    const source: OriginSource = name === key ? 'study' : `like ${name}`;
    layers.push({ source, path: ['stock', name], values });
    seen.add(name);
    const { like } = values;
    if (like === undefined) return layers;
    const path = ['stock', name, 'like'];
    const next = Object.hasOwn(input, like) ? input[like] : undefined;
    if (seen.has(like)) {
      reading.fault(path, 'a stock that does not lead back to this one');
      return undefined;
    }
    if (next === undefined) {
      if (!reading.isIncomplete(['stock', like])) {
        reading.fault(path, 'the name of another stock', didYouMean(like, Object.keys(input)));
      }
      return undefined;
    }
    if (!isPopulation(next)) {
      reading.fault(path, 'a stock whose modules are drawn, not written down');
      return undefined;
    }
    name = like;
    values = next;
  }
}
