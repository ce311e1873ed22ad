import { meanOf } from '../mathematics/mean.js';
import { impossibleValue } from './check-supports.js';
import { CUT_SDS } from './law-moments.js';
import { lawSupport } from './law-support.js';
import type { Picked } from './layers.js';
import type { MeasuredInput } from './measured.js';
import { didYouMean } from './nearest-name.js';
import type { Origin } from './origin.js';
import type { Problem } from './problem.js';
import { QUANTITIES, type QuantityName } from './quantities.js';
import { QUANTITY_KEYS, quantityOfKey } from './quantity-keys.js';
import type { Reading } from './reading.js';
import type { ResolvedSpread } from './resolve-spread.js';
import { showValue } from './show-value.js';
import type { Law, MeasuredModules } from './study.js';
import { renderPath, type StudyPath } from './study-path.js';
import { MOST_PROBLEMS } from './table-lines.js';
import { readTextTable, type TextTable } from './text-table.js';
import { differenceFromKey, inUnitOfKey, siFromKey, unitOfKey } from './units.js';

type Spreads = Readonly<Record<QuantityName, ResolvedSpread>>;

/** The stock whose modules were measured. */
export interface MeasuredStock {
  readonly owner: StudyPath;
  readonly moduleIds: readonly string[];
  readonly cellsInSeries: number;
  /** As they would be without measured values. */
  readonly spreads: Spreads;
}

export interface ResolvedMeasured {
  readonly measured: MeasuredModules;
  /** The quantities of the stock, those that were measured with the least and greatest value they then have. */
  readonly spreads: Spreads;
}

const GREATEST = 1e6;
const ID_COLUMN = 'module';
const FIXED: Law = { law: 'fixed' };

/** @returns the measured values of a stock, or undefined after recording what is wrong with them */
export function resolveMeasured(
  { value: input, source, path }: Picked<MeasuredInput>,
  stock: MeasuredStock,
  reading: Reading,
): ResolvedMeasured | undefined {
  const { file } = input;
  const text = reading.textOf([...path, 'file'], file);
  if (text === undefined) return undefined;
  const read = readTextTable(text, file);
  if ('problems' in read) {
    reading.addTableProblems(read.problems);
    return undefined;
  }
  const { table } = read;
  const isDrawn = input.rows === 'resampled';
  const names = measuredNames(table, !isDrawn, reading);
  if (names === undefined) return undefined;
  const uncertainty = uncertaintyOf(input, names, [...path, 'uncertainty'], reading);
  const columns = names.map((name) => columnOf(table, name, reading));
  const rowOf = isDrawn ? new Map<string, number>() : rowsById(table, stock, file, reading);
  if (columns.some((column) => column === undefined) || rowOf === undefined) return undefined;
  const rows = table.rows.map((_, row) => columns.map((column) => column?.[row] ?? Number.NaN));
  const used = isDrawn ? rows.map((_, row) => row) : stock.moduleIds.map((id) => rowOf.get(id) ?? 0);
  const spreads: Record<QuantityName, ResolvedSpread> = { ...stock.spreads };
  for (const [place, name] of names.entries()) {
    const sd = uncertainty[place] ?? 0;
    const own = withBase(stock.spreads[name]);
    const reaches = used.map((row) => ({
      row,
      ...reachOf(name, rows[row]?.[place] ?? 0, sd, own, stock.cellsInSeries),
    }));
    const impossible = reaches.flatMap(({ row, lower, upper }) => {
      const fault = impossibleValue(name, lower, upper);
      if (fault === undefined) return [];
      const message = `must be measured so that, with uncertainty and cells, it is ${fault.rule}, got ${fault.shown}`;
      return [table.problemAt(row, QUANTITY_KEYS[name], message)];
    });
    reading.addTableProblems(impossible.slice(0, MOST_PROBLEMS));
    const lower = leastOf(reaches.map((reach) => reach.lower));
    const upper = greatestOf(reaches.map((reach) => reach.upper));
    spreads[name] = { ...own, lower, upper };
    noteOrigin(stock.owner, name, columns[place] ?? [], used, input, source, reading);
  }
  const common = { quantities: names, uncertaintySd: uncertainty };
  const measured: MeasuredModules = isDrawn
    ? { ...common, rows: 'resampled', values: rows }
    : {
        ...common,
        rows: 'of-each-module',
        valuesOf: Object.fromEntries(stock.moduleIds.map((id) => [id, rows[rowOf.get(id) ?? 0] ?? []])),
      };
  return { measured, spreads };
}

/** The quantities that have a column, in registry order. */
function measuredNames(table: TextTable, needsIds: boolean, reading: Reading): readonly QuantityName[] | undefined {
  const known = [ID_COLUMN, ...Object.values(QUANTITY_KEYS)];
  const unknown = table.names.filter((name) => !known.includes(name));
  reading.addTableProblems(
    unknown.map((name) => {
      const rule = `must be ${ID_COLUMN} or a quantity of a stock, such as capacity_Ah`;
      return table.problemAt(null, name, `${rule}, got ${showValue(name)}${didYouMean(name, known)}`);
    }),
  );
  if (unknown.length > 0) return undefined;
  const got = `got ${showValue(table.names.join(','))}`;
  if (needsIds && !table.names.includes(ID_COLUMN)) {
    reading.addTableProblems([table.problemAt(null, ID_COLUMN, `must be a column, ${got}`)]);
    return undefined;
  }
  const names = QUANTITIES.map(({ name }) => name).filter((name) => table.names.includes(QUANTITY_KEYS[name]));
  if (names.length > 0) return names;
  reading.addTableProblems([table.problemAt(null, '', `must be a table with a column such as capacity_Ah, ${got}`)]);
  return undefined;
}

function uncertaintyOf(
  { uncertainty, file }: MeasuredInput,
  names: readonly QuantityName[],
  path: StudyPath,
  reading: Reading,
): readonly number[] {
  for (const key of Object.keys(uncertainty ?? {})) {
    const name = quantityOfKey(key);
    if (name === undefined || names.includes(name)) continue;
    reading.fault([...path, key], `given for a column of ${file} only`);
  }
  return names.map((name) => differenceFromKey(QUANTITY_KEYS[name], uncertainty?.[QUANTITY_KEYS[name]] ?? 0));
}

function columnOf(table: TextTable, name: QuantityName, reading: Reading): readonly number[] | undefined {
  const key = QUANTITY_KEYS[name];
  const numbers = table.numbers(key, { atLeast: -GREATEST, atMost: GREATEST });
  if ('values' in numbers) return numbers.values.map((value) => siFromKey(key, value));
  reading.addTableProblems(numbers.problems);
  return undefined;
}

/** The row of each module of the file; modules that the stock does not have may stand in it too. */
function rowsById(
  table: TextTable,
  { owner, moduleIds }: MeasuredStock,
  file: string,
  reading: Reading,
): ReadonlyMap<string, number> | undefined {
  const place = table.names.indexOf(ID_COLUMN);
  const rowOf = new Map<string, number>();
  const problems: Problem[] = [];
  for (const [row, { cells }] of table.rows.entries()) {
    const id = cells[place]?.text ?? '';
    if (id === '' || rowOf.has(id)) {
      const rule = id === '' ? 'the name of a module' : 'a module that is given once';
      problems.push(table.problemAt(row, ID_COLUMN, `must be ${rule}, got ${showValue(id)}`));
    }
    rowOf.set(id, row);
  }
  reading.addTableProblems(problems.slice(0, MOST_PROBLEMS));
  let sound = problems.length === 0;
  for (const [index, id] of moduleIds.entries()) {
    if (rowOf.has(id)) continue;
    const path = [...owner, 'modules', index];
    reading.fault(path, `a module with a row in ${file}`, didYouMean(id, [...rowOf.keys()]));
    sound = false;
  }
  return sound ? rowOf : undefined;
}

/** A relative spread about 0 spreads nothing, and says nothing of a value that is measured to be another. */
function withBase(spread: ResolvedSpread): ResolvedSpread {
  if (spread.nominal !== 0 || !spread.relative) return spread;
  return { ...spread, relative: false, laws: { lot: FIXED, module: FIXED, cell: FIXED, bank: FIXED } };
}

/**
 * Least and greatest value of a cell of a measured module.
 *
 * Deviations of cells are moved so that the module keeps its measured value: its capacity is that of its smallest cell,
 * everything else the mean of its cells. With w the width of the cells' law, n cells reach 0 to w above their smallest
 * and up to w (n - 1) / n from their mean.
 */
function reachOf(
  name: QuantityName,
  value: number,
  uncertaintySd: number,
  { laws, relative, nominal }: ResolvedSpread,
  cells: number,
): { readonly lower: number; readonly upper: number } {
  const support = lawSupport(laws.cell, relative ? 1 : nominal);
  const width = (support.upper - support.lower) * (relative ? Math.abs(nominal) : 1);
  const off = CUT_SDS * uncertaintySd;
  if (name === 'capacityAh') return { lower: value - off, upper: value + off + width };
  const reach = (width * (cells - 1)) / cells;
  return { lower: value - off - reach, upper: value + off + reach };
}

/** Not `Math.min(...values)`: a table has more rows than a call may have arguments. */
function leastOf(values: readonly number[]): number {
  return values.reduce((least, value) => Math.min(least, value), Number.POSITIVE_INFINITY);
}

function greatestOf(values: readonly number[]): number {
  return values.reduce((greatest, value) => Math.max(greatest, value), Number.NEGATIVE_INFINITY);
}

/** Says that a quantity is measured, in place of the nominal value and the deviations that this sets aside. */
function noteOrigin(
  owner: StudyPath,
  name: QuantityName,
  column: readonly number[],
  used: readonly number[],
  { file, rows, uncertainty }: MeasuredInput,
  source: Picked<unknown>['source'],
  reading: Reading,
): void {
  const key = QUANTITY_KEYS[name];
  const own = renderPath([...owner, ...key.split('.')]);
  const isAside = ({ path }: Origin): boolean => [own, `${own}.lot`, `${own}.module`].includes(path);
  const values = used.map((row) => inUnitOfKey(key, column[row] ?? 0));
  const round = (value: number): number => Number(value.toPrecision(5));
  const range = `${round(leastOf(values))} to ${round(greatestOf(values))}`;
  const sd = uncertainty?.[key] ?? 0;
  const drawn = rows === 'resampled' ? `one of ${values.length} rows, mean ${round(meanOf(values))}, ` : '';
  const origin: Origin = {
    path: own,
    value: `${drawn}${range}${sd > 0 ? `, uncertain by sd ${sd}` : ''} (${file})`,
    unit: unitOfKey(key),
    source,
  };
  const told = reading.origins.flatMap((one) => (one.path === own ? [origin] : isAside(one) ? [] : [one]));
  reading.origins.splice(0, reading.origins.length, ...told);
}
