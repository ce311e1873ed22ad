import { didYouMean } from './nearest-name.js';
import type { Reading } from './reading.js';
import type { CellModel, Stock } from './study.js';
import { type StudyPath, valueAt } from './study-path.js';

/** What the wiring of a candidate has to know of a module. */
export interface ModuleFacts {
  readonly stock: string;
  readonly cellsInSeries: number;
  readonly ratedAh: number;
  /** Cells of equal kind can be re-housed in one pack. */
  readonly cellKind: string;
}

/** @returns the facts of every module of the stocks, by its name */
export function moduleFacts(stocks: readonly Stock[]): ReadonlyMap<string, ModuleFacts> {
  const facts = new Map<string, ModuleFacts>();
  for (const stock of stocks) {
    if (stock.kind === 'population') {
      const { key, cellsInSeries, ratedAh, cell } = stock;
      const timeConstants = cell.polarisation.map(({ timeConstantS }) => timeConstantS);
      for (const id of stock.moduleIds) {
        facts.set(id, { stock: key, cellsInSeries, ratedAh, cellKind: cellKind(cell, timeConstants) });
      }
    } else {
      for (const module of stock.modules) {
        facts.set(module.id, {
          stock: stock.key,
          cellsInSeries: module.capacityAh.length,
          ratedAh: module.ratedAh,
          cellKind: cellKind(
            module,
            module.polarisation.map(({ timeConstantS }) => timeConstantS),
          ),
        });
      }
    }
  }
  return facts;
}

function cellKind(
  { ocv, hysteresisV, hysteresisRate }: Pick<CellModel, 'ocv' | 'hysteresisV' | 'hysteresisRate'>,
  timeConstantsS: readonly number[],
): string {
  return JSON.stringify([ocv, hysteresisV, hysteresisRate, ...timeConstantsS]);
}

/** A bank that can be wired: its modules with what is known of them, string by string. */
export interface WiredModules {
  readonly strings: readonly (readonly ModuleFacts[])[];
  readonly cellsInSeries: number;
  /** Rated capacity of the bank: of each string its smallest module, summed. */
  readonly ratedAh: number;
}

/** @returns the names of all modules in the section `stock` as written, those of faulty stocks included */
export function namedModules(stocks: unknown): ReadonlySet<string> {
  const names = new Set<string>();
  for (const stock of Object.values(stocks ?? {})) {
    const modules = valueAt(stock, ['modules']);
    if (typeof modules !== 'object' || modules === null) continue;
    for (const name of Array.isArray(modules) ? modules : Object.keys(modules)) names.add(String(name));
  }
  return names;
}

/** @returns the modules of a candidate, or undefined after recording why they make no bank */
export function wireModules(
  path: StudyPath,
  wiring: 'strings' | 'cross-linked' | 'native' | 'custom',
  modules: readonly (readonly string[])[],
  known: ReadonlyMap<string, ModuleFacts>,
  named: ReadonlySet<string>,
  reading: Reading,
): WiredModules | undefined {
  const at = [...path, 'modules'];
  const positions = modules[0]?.length ?? 0;
  const used = new Set<string>();
  const strings: ModuleFacts[][] = [];
  let sound = true;
  for (const [stringIndex, ids] of modules.entries()) {
    if (ids.length !== positions) {
      reading.fault([...at, stringIndex], `a string of ${positions} modules, as the first one`);
      sound = false;
    }
    const string: ModuleFacts[] = [];
    for (const [position, id] of ids.entries()) {
      const facts = known.get(id);
      if (facts !== undefined) string.push(facts);
      else {
        sound = false;
        // A module that is named but not known has faults of its own, which are told already.
        if (!named.has(id)) {
          reading.fault([...at, stringIndex, position], 'a module of a stock', didYouMean(id, [...named]));
        }
      }
      if (used.has(id)) {
        reading.fault([...at, stringIndex, position], 'a module that stands once in the candidate');
        sound = false;
      }
      used.add(id);
    }
    strings.push(string);
  }
  if (!sound) return undefined;
  const first = strings[0]?.[0];
  if (first === undefined) return undefined;
  const all = strings.flat();
  if (all.some(({ cellsInSeries }) => cellsInSeries !== first.cellsInSeries)) {
    const counts = [...new Set(all.map(({ cellsInSeries }) => cellsInSeries))].join(', ');
    reading.faultWith(at, `must be modules with equal numbers of cells in series, got ${counts}`);
    return undefined;
  }
  if (wiring === 'native' && strings.some((string) => new Set(string.map(({ cellKind: kind }) => kind)).size > 1)) {
    reading.fault(at, 'cells of one kind within a native pack (same OCV table, hysteresis and time constants)');
    return undefined;
  }
  const ratedAh = strings.reduce((sum, string) => sum + Math.min(...string.map((module) => module.ratedAh)), 0);
  return { strings, cellsInSeries: positions * first.cellsInSeries, ratedAh };
}
