import { type NominalModule, nominalModules } from './bank-module.js';
import type { Study } from './study.js';

/** Modules of 4 cells, 12.8 V, that makers commonly allow in series at most [common practice, no source]. */
const MOST_IN_SERIES = 4;
const CELLS_OF_A_MODULE = 4;
/** Nominal voltage of a lithium iron phosphate cell, V. */
const CELL_V = 3.2;

/** Resistances of a cell of 100 Ah beyond which its unit was probably mistaken, Ohm [own choice]. */
const LEAST_OHM_AT_100_AH = 0.05e-3;
const MOST_OHM_AT_100_AH = 10e-3;

type Strings = readonly (readonly NominalModule[])[];
type Warn = (text: string) => void;

/** Notes strings longer than makers commonly allow. */
export function warnOfSeriesCount(strings: Strings, warn: Warn): void {
  const cells = cellsInSeries(strings);
  if (cells <= MOST_IN_SERIES * CELLS_OF_A_MODULE) return;
  warn(
    `${cells} cells in series, ${nominalVolts(cells)}, are more than ${MOST_IN_SERIES} modules of 12.8 V, the most that ` +
      'makers commonly allow (common practice, no source): look up the limit of your modules before you build',
  );
}

/**
 * Warns of a cell resistance out of all proportion to its size.
 *
 *   R_100 = R Q / 100 Ah          (a cell twice as large has half the resistance)
 */
export function warnOfUnits(strings: Strings, warn: Warn): void {
  const stocks = new Set<string>();
  for (const { stock, resistanceOhm, ratedAh } of strings.flat()) {
    const ohmAt100Ah = (resistanceOhm * ratedAh) / 100;
    if (stocks.has(stock)) continue;
    if (ohmAt100Ah >= LEAST_OHM_AT_100_AH && ohmAt100Ah <= MOST_OHM_AT_100_AH) continue;
    stocks.add(stock);
    const is = ohmAt100Ah > MOST_OHM_AT_100_AH ? 'much for' : 'little for';
    const range = `${1000 * LEAST_OHM_AT_100_AH} to ${1000 * MOST_OHM_AT_100_AH} mOhm at 100 Ah`;
    warn(
      `stock ${stock}: ${milliohms(resistanceOhm)} is ${is} a cell of ${ratedAh} Ah (usual: ${range}); ` +
        'cell_resistance_mOhm is in milliohms and of one cell, not of a module: check the figure',
    );
  }
}

/** Warns of candidates of unlike voltage: one load and one charger do not fit them all. */
export function unlikeVoltages(study: Study): readonly string[] {
  const byCells = new Map<number, string[]>();
  for (const candidate of study.candidates) {
    const cells = cellsInSeries(nominalModules(study, candidate));
    byCells.set(cells, [...(byCells.get(cells) ?? []), candidate.key]);
  }
  if (byCells.size < 2) return [];
  const groups = [...byCells].map(([cells, keys]) => `${nominalVolts(cells)}: ${keys.join(', ')}`);
  return [
    `candidates of unlike nominal voltage (${groups.join('; ')}): the comparison is not one of wiring alone; give them ` +
      'equal numbers of cells in series, or studies of their own',
  ];
}

function cellsInSeries(strings: Strings): number {
  return strings[0]?.reduce((sum, { cells }) => sum + cells, 0) ?? 0;
}

function nominalVolts(cells: number): string {
  return `${Number((cells * CELL_V).toFixed(1))} V`;
}

function milliohms(ohm: number): string {
  return `${Number((1000 * ohm).toPrecision(4))} mOhm`;
}
