import type { QuantityName } from './quantities.js';
import type { Duty, PopulationStock, SobolColumn, Stock } from './study.js';

/** More columns do harm: at few points many pairs of them are strongly correlated. */
const MOST_COLUMNS = 32;

/** Quantities whose draws for lots and modules have a column, those that matter most first. Append only. */
const QUANTITIES_IN_ORDER: readonly QuantityName[] = [
  'arrivalCharge',
  'capacityAh',
  'standbyA',
  'resistanceOhm',
  'overVoltageV',
  'overVoltageReleaseV',
  'underVoltageV',
  'underVoltageReleaseV',
];

/**
 * The draws that have a column of the sequence of Sobol, in order of columns: factors of the bank, lots, then modules
 * quantity by quantity; of each only what spreads. All others are spread by themselves.
 *
 * The table belongs to the study as it was read: a variant with a spread less keeps the columns of all others.
 */
export function sobolColumns(duty: Duty, stocks: readonly Stock[]): readonly SobolColumn[] {
  const populations = stocks.filter((stock) => stock.kind === 'population');
  const perQuantity = (columnsOf: (stock: PopulationStock, quantity: QuantityName) => readonly SobolColumn[]) =>
    QUANTITIES_IN_ORDER.flatMap((quantity) => populations.flatMap((stock) => columnsOf(stock, quantity)));
  return [...bankColumns(duty), ...perQuantity(lotColumns), ...perQuantity(moduleColumns)].slice(0, MOST_COLUMNS);
}

function bankColumns(duty: Duty): readonly SobolColumn[] {
  return (['loadFactor', 'chargeFactor'] as const)
    .filter((factor) => duty[factor].bank.law !== 'fixed')
    .map((quantity) => ({ level: 'bank', stock: null, module: null, quantity }));
}

function lotColumns(stock: PopulationStock, quantity: QuantityName): readonly SobolColumn[] {
  if (stock.quantities[quantity].lot.law === 'fixed' || isMeasured(stock, quantity)) return [];
  return lotNames(stock).map((lot) => ({
    level: 'lot',
    stock: stock.key,
    module: null,
    quantity,
    ...(lot !== undefined && { lot }),
  }));
}

function moduleColumns(stock: PopulationStock, quantity: QuantityName): readonly SobolColumn[] {
  if (stock.quantities[quantity].module.law === 'fixed' || isMeasured(stock, quantity)) return [];
  return stock.moduleIds.map((module) => ({ level: 'module', stock: stock.key, module, quantity }));
}

/** Measured values stand in place of what lot and module would have drawn. */
function isMeasured({ measured }: PopulationStock, quantity: QuantityName): boolean {
  return measured?.quantities.includes(quantity) ?? false;
}

/** Names of the lots of a stock as its draws know them: the first of several unnamed ones has none. */
function lotNames({ lots }: PopulationStock): readonly (string | undefined)[] {
  if (lots === undefined) return [undefined];
  if (lots.kind === 'by-name') return [...new Set(Object.values(lots.lotOf))];
  return Array.from({ length: lots.count }, (_, k) => (k === 0 ? undefined : String(k + 1)));
}
