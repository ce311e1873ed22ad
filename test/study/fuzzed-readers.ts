import { performance } from 'node:perf_hooks';
import seedrandom from 'seedrandom';
import { canonicalJson } from '../../src/study/canonical-json.js';
import { renderProblem } from '../../src/study/problem.js';
import { mutated, type Random } from './mutants.js';
import { read, repositoryText } from './study-under-test.js';

/** A case takes milliseconds; this is far beyond what a busy machine makes of them. */
const LONGEST_CASE_MS = 20_000;

/** Short, since mutants of a short table are more often read. */
const SHORT_PROFILE = 'time_h,load_W,charge_W\n0,100,0\n12,0,300\n';
const PROFILES = [
  repositoryText('studies/winter-frost.csv').split('\n').slice(0, 40).join('\n'),
  'time_h;load_W;charge_W;load_peak_W;peak_s;ambient_degC\n0;100,5;0;250;10;-4,5\n12;0;300,25;;;8\n',
];
const PROFILE_STUDY = `motleybank: 1
stock: {house: {modules: [A1, A2, A3, A4], rated_Ah: 100}}
duty: {profile: table.csv}
candidates: {strings: {wiring: strings, modules: [[A1, A2], [A3, A4]]}}
`;
const stockStudy = (lines: string) => `motleybank: 1
stock: {house: {modules: [A1, A2, A3, A4], rated_Ah: 100, ${lines}}}
duty: {phases: [{discharge_W: 500, for_h: 4}, {charge: to-full, at_most_h: 10}]}
candidates: {strings: {wiring: strings, modules: [[A1, A2], [A3, A4]]}}
`;
const MEASURED =
  'module,capacity_Ah,standby_mA,arrival_charge_percent\nA1,94.2,8.3,50\nA2,96.5,7.9,52\nA3,91,8,48\nA4,99,9,51\n';
/** Stocks with the table that each reads. */
const STOCKS: readonly (readonly [study: string, table: string])[] = [
  [stockStudy('measured: {file: table.csv, uncertainty: {capacity_Ah: 0.5}}'), MEASURED],
  [stockStudy('measured: {file: table.csv, rows: resampled}'), MEASURED.replaceAll(',', ';').replaceAll('.', ',')],
  [stockStudy('capacity_Ah: {nominal: 95, module: {law: resampled, file: table.csv, column: capacity_Ah}}'), MEASURED],
  [
    `ocv: {own: {file: table.csv}}\n${stockStudy('ocv: own')}`.replace(/^(ocv.*\n)(motleybank.*\n)/, '$2$1'),
    'charge_percent,V\n0,2.5\n10,3.1\n50,3.28\n90,3.33\n100,3.45\n',
  ],
];
/** Studies that use much of the language, with the tables that they name. */
const STUDIES = ['demo', 'winter', 'bench-measured', 'published-spreads', 'clinic-48v', 'workshop-mixed'].map((name) =>
  repositoryText(`studies/${name}.yaml`),
);
const TABLES = {
  'demo-week.csv': SHORT_PROFILE,
  'winter-bright.csv': SHORT_PROFILE,
  'winter-dark.csv': SHORT_PROFILE,
  'winter-frost.csv': SHORT_PROFILE,
  'bench-measured.csv': repositoryText('studies/bench-measured.csv'),
};

export type Reader = 'study' | 'profile' | 'stock';
export interface Counts {
  readonly read: number;
  readonly refused: number;
}

/** A case of which something untoward came, with all that it takes to see it again. */
class BadCase extends Error {}

/**
 * Reads so many mutants; each must come out as a sound study or as problems that can be printed, and in good time.
 *
 * @throws BadCase with the text of the first mutant that does not
 */
export function fuzz(reader: Reader, cases: number, seed: string): Counts {
  const random = seedrandom(`${seed} ${reader}`);
  const counts = { read: 0, refused: 0 };
  for (let run = 1; run <= cases; run++) {
    const { study, tables } = mutant(reader, run, random);
    const startMs = performance.now();
    try {
      counts[judged(study, tables)]++;
      const tookMs = performance.now() - startMs;
      if (tookMs > LONGEST_CASE_MS) throw new Error(`took ${Math.round(tookMs)} ms`);
    } catch (error) {
      const what = error instanceof Error ? error.stack : String(error);
      throw new BadCase(`${reader} case ${run}: ${what}\n${JSON.stringify({ study, tables })}`);
    }
  }
  return counts;
}

function mutant(reader: Reader, run: number, random: Random) {
  if (reader === 'study') return { study: mutated(STUDIES[run % STUDIES.length] ?? '', random), tables: TABLES };
  if (reader === 'profile') {
    return { study: PROFILE_STUDY, tables: { 'table.csv': mutated(PROFILES[run % PROFILES.length] ?? '', random) } };
  }
  const [study, table] = STOCKS[run % STOCKS.length] ?? ['', ''];
  return { study, tables: { 'table.csv': mutated(table, random) } };
}

function judged(study: string, tables: Readonly<Record<string, string>>): keyof Counts {
  const result = read(study, tables);
  if (result.kind === 'read') {
    // Throws at a number that is not finite.
    canonicalJson(result.study);
    return 'read';
  }
  const told = result.problems.map(renderProblem);
  if (told.length === 0) throw new Error('refused without a problem');
  const unclear = told.find((line) => !/must be [^\n]+$/.test(line));
  if (unclear !== undefined) throw new Error(`refused with ${JSON.stringify(unclear)}`);
  return 'refused';
}
