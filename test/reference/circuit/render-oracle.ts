import { renderCsv } from '../../../src/output/csv.js';
import { renderTextTable } from '../../../src/output/text-table.js';
import type { OracleResult } from './oracle-bank.js';
import { agreementColumns, HAPPENED, type OracleColumn, SPEED } from './oracle-columns.js';

const ENGINE_AND_DECK = agreementColumns(({ engineAndDeck }) => engineAndDeck.agreement);
const DECK_AND_OUTSIDE = agreementColumns(({ outside }) => outside?.decks ?? null, 'outside_deck_');
const OUTSIDE_RUNS = agreementColumns(({ outside }) => outside?.runs ?? null, 'outside_run_');

/** Wide enough for a table in one piece. */
const WIDTH = 180;

/** The tables of a suite, a line of sums below them, and every disagreement in words. */
export function renderOracle(results: readonly OracleResult[]): string {
  const outside = results.filter((result) => result.outside !== null);
  return [
    ...table('Largest differences between the engine and its deck in the circuit simulator', results, ENGINE_AND_DECK),
    ...(outside.length === 0
      ? []
      : [
          ...table(
            'Our deck against the outside deck of the same bank, both in the simulator',
            outside,
            DECK_AND_OUTSIDE,
          ),
          ...table('The outside deck in the simulator against the outside run', outside, OUTSIDE_RUNS),
        ]),
    ...table('What happened in the traces', results, HAPPENED),
    ...table('Processor time, the simulator at reltol 1e-4 and steps of up to 30 s', results, SPEED),
    ...summary(results),
    ...results.flatMap((result) => faultsOf(result).map((fault) => `${result.bank}: ${fault}`)),
    '',
  ].join('\n');
}

/** One row for each bank, with the figures of all tables. */
export function renderOracleCsv(results: readonly OracleResult[]): Promise<string> {
  const columns = [...ENGINE_AND_DECK, ...HAPPENED, ...SPEED, ...DECK_AND_OUTSIDE, ...OUTSIDE_RUNS];
  return renderCsv(
    ['bank', 'wiring', 'course', ...columns.map(({ name }) => name)],
    results.map((result) => [
      result.bank,
      result.wiring,
      result.course,
      ...columns.map(({ value, digits }) => {
        const figure = value(result);
        return figure === null ? null : Number(figure.toFixed(digits + 1));
      }),
    ]),
  );
}

/** Every disagreement of a bank, in words. */
export function faultsOf({ engineAndDeck, outside }: OracleResult): readonly string[] {
  return [
    ...engineAndDeck.agreement.faults.map((fault) => `engine with its deck: ${fault}`),
    ...(outside?.decks.faults ?? []).map((fault) => `our deck with the outside deck: ${fault}`),
    ...(outside?.runs.faults ?? []).map((fault) => `outside deck with the outside run: ${fault}`),
  ];
}

function table(title: string, results: readonly OracleResult[], columns: readonly OracleColumn[]): string[] {
  const wirings = [...new Set(results.map(({ wiring }) => wiring))];
  const sections = wirings.map((wiring) => ({
    title: wiring,
    rows: results
      .filter((result) => result.wiring === wiring)
      .map((result) => ({
        name: `${result.bank.padEnd(11)} ${result.course}`,
        cells: columns.map(({ value, digits }) => [value(result)?.toFixed(digits) ?? '']),
      })),
  }));
  return [title, '', ...renderTextTable('', columns, sections, WIDTH), ''];
}

/** Largest differences over all banks, how many banks show what, and the middle of the ratios of processor time. */
function summary(results: readonly OracleResult[]): string[] {
  const valuesOf = ({ value }: OracleColumn): number[] => results.flatMap((result) => value(result) ?? []);
  const largest = ENGINE_AND_DECK.filter(({ name }) => name !== 'events' && name !== 'current_limit_mA').map(
    (column) => `${column.name} ${Math.max(...valuesOf(column)).toFixed(column.digits)}`,
  );
  const shown = HAPPENED.map((column) => `${column.name} in ${valuesOf(column).filter((count) => count > 0).length}`);
  const ratios = results
    .map(({ engineAndDeck: { speed } }) => speed.looseCpuS / speed.engineCpuS)
    .sort((a, b) => a - b);
  return [
    `Banks: ${results.length}. Largest: ${largest.join(', ')}.`,
    `Banks with: ${shown.join(', ')}.`,
    `Simulator over engine, processor time: median ${ratios[Math.floor(ratios.length / 2)].toFixed(0)}, ${ratios[0].toFixed(0)} to ${ratios[ratios.length - 1].toFixed(0)}.`,
  ];
}
