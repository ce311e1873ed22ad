import { z } from 'zod';
import { EXPLICIT_STOCK, type ExplicitStockInput } from './explicit-module.js';
import { NAME, NAME_RULE } from './names.js';
import { named } from './section.js';
import { POPULATION, type StockInput } from './stock.js';

/** The section `stock`: populations (modules as a list) and modules written down (modules as a mapping). */
export const STOCKS = named(NAME, NAME_RULE, z.union([POPULATION, EXPLICIT_STOCK], 'a stock with its modules'));

/** @returns true if the modules of the stock are drawn, false if they are written down */
export function isPopulation(stock: StockInput | ExplicitStockInput): stock is StockInput {
  return Array.isArray(stock.modules);
}
