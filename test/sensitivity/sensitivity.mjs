/**
 * What the demo owes to values that nobody measures: the top of the open-circuit curve, the bleed rule, the hysteresis.
 *
 * `npm run sensitivity [BANKS]` takes the same sampled banks (64 unless said otherwise) of the candidate `strings` through
 * the demo's days, with one thing changed at a time, and prints a line for each.
 */
import { readFileSync } from 'node:fs';
import { measureChoices, outcomeColumns, prepareCandidate, readStudy, simulateInstance } from '../../dist/src/index.js';

const BANKS = Number(process.argv[2] ?? 64);
const CANDIDATE = 'strings';

const textOf = (name) => readFileSync(new URL(`../../studies/${name}`, import.meta.url), 'utf8');
const read = readStudy(textOf('demo.yaml'), {
  fileName: 'demo.yaml',
  readText: (name) => ({ text: textOf(name) }),
  measures: measureChoices(),
});
if (!('study' in read)) throw new Error(JSON.stringify(read));
const { study } = read;

/** The study with its open-circuit curve replaced above a charge fraction; 1 stays at 3.65 V. */
const withTop = (from, points) => {
  const ocvTables = study.ocvTables.map((table) => {
    const kept = table.chargeFraction.filter((z) => z < from).length;
    return {
      ...table,
      chargeFraction: [...table.chargeFraction.slice(0, kept), ...points.map(([z]) => z)],
      voltageV: [...table.voltageV.slice(0, kept), ...points.map(([, volts]) => volts)],
    };
  });
  return { ...study, ocvTables };
};
const withBleed = (bleed) => ({
  ...study,
  candidates: study.candidates.map((candidate) => (candidate.key === CANDIDATE ? { ...candidate, bleed } : candidate)),
});
const withHysteresis = (factor) => ({
  ...study,
  stocks: study.stocks.map((stock) => ({
    ...stock,
    cell: { ...stock.cell, hysteresisV: factor * stock.cell.hysteresisV },
  })),
});

const VARIANTS = [
  ['as the demo has it', study],
  [
    'top: rises from 0.98 on',
    withTop(0.978, [
      [0.98, 3.4],
      [0.99, 3.5],
      [1, 3.65],
    ]),
  ],
  [
    'top: rises from 0.997 on',
    withTop(0.9925, [
      [0.997, 3.42],
      [1, 3.65],
    ]),
  ],
  ['bleed: each cell', withBleed({ rule: 'each' })],
  ['bleed: above the lowest', withBleed({ rule: 'above-lowest' })],
  ['bleed: none', withBleed({ rule: 'none' })],
  ['hysteresis: none', withHysteresis(0)],
  ['hysteresis: twice as wide', withHysteresis(2)],
];

const mean = (values) => values.reduce((sum, value) => sum + value, 0) / values.length;
const median = (values) => [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)];
const percent = (values) => `${(100 * mean(values)).toFixed(1)} %`;
const COLUMNS = [
  ['early cutoff on charge', (of) => percent(of('early_cutoff_on_charge'))],
  ['load lost', (of) => percent(of('load_lost'))],
  ['median drift', (of) => `${median(of('drift')).toFixed(2)} %`],
  ['mean lost capacity', (of) => `${mean(of('lost_capacity')).toFixed(2)} %`],
  ['over-voltage trips per cycle', (of) => mean(of('over_voltage_trips')).toFixed(2)],
];

process.stdout.write(`candidate ${CANDIDATE} of the demo, ${BANKS} banks, ${study.cycles} days\n`);
process.stdout.write(`| | ${COLUMNS.map(([title]) => title).join(' | ')} |\n|---|${'---|'.repeat(COLUMNS.length)}\n`);
for (const [title, variant] of VARIANTS) {
  const prepared = prepareCandidate(variant, CANDIDATE);
  const { strings, positions } = prepared.twin.bank;
  const columns = outcomeColumns({ strings, positions, checkpoints: prepared.checkpoints });
  const rows = Array.from({ length: BANKS }, (_, i) => simulateInstance(prepared, i + 1).values);
  const of = (name) => {
    const at = columns.findIndex((column) => column.name === name);
    if (at < 0) throw new Error(`no column ${name}`);
    return rows.map((values) => Number(values[at]));
  };
  process.stdout.write(`| ${title} | ${COLUMNS.map(([, value]) => value(of)).join(' | ')} |\n`);
}
