import { spawnSync } from 'node:child_process';
import { cpSync, mkdirSync, mkdtempSync, readdirSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

const TREE = fileURLToPath(new URL('../..', import.meta.url));
const TOOL = join(TREE, 'node_modules/dependency-cruiser/bin/dependency-cruise.mjs');

/** Files planted in a copy of the tree: path, text, and the rule that must refuse it; null where none may. */
const PLANTED: readonly (readonly [string, string, string | null])[] = [
  ['src/mathematics/p1.ts', "export type { Study } from '../study/study.js';", 'mathematics-imports-what-it-may'],
  ['src/bank/p2.ts', "export { ENGINE } from '../study/engine.js';", 'bank-imports-types-only'],
  ['src/bank/p3.ts', "export type { Study } from '../study/study.js';", null],
  ['src/duty/p4.ts', "export type { Bank } from '../bank/bank.js';", 'duty-imports-what-it-may'],
  ['src/sampling/p5.ts', "export { buildBank } from '../bank/bank.js';", 'sampling-imports-types-only'],
  ['src/measures/p6.ts', "export { dutyCourse } from '../duty/course.js';", 'measures-imports-types-only'],
  ['src/measures/p7.ts', "import '../simulation/simulate-instance.js';", 'measures-imports-what-it-may'],
  [
    'src/simulation/p8.ts',
    "export type { OutcomeColumn } from '../outcomes/columns.js';",
    'simulation-imports-what-it-may',
  ],
  ['src/outcomes/p9.ts', "export type { Study } from '../study/study.js';", 'outcomes-imports-what-it-may'],
  ['src/statistics/p10.ts', "export type { Measure } from '../measures/measure.js';", 'statistics-imports-what-it-may'],
  [
    'src/questions/p11.ts',
    "export { simulateTwin } from '../simulation/simulate-instance.js';",
    'questions-imports-what-it-may',
  ],
  [
    'src/execution/p12.ts',
    "export { meanEstimate } from '../statistics/mean-estimate.js';",
    'execution-imports-what-it-may',
  ],
  ['src/output/p13.ts', "export { answerStudy } from '../questions/answer-study.js';", 'output-imports-types-only'],
  ['workers/p14.ts', "export { readStudy } from '../src/study/read-study.js';", 'workers-imports-types-only'],
  ['src/study/p15.ts', "export const lazily = () => import('../sampling/streams.js');", 'study-imports-what-it-may'],
  ['src/commands/p16.ts', "export { simulateTwin } from '../simulation/simulate-instance.js';", null],
  ['src/commands/p17.ts', "export { widget } from '../widgets/widget.js';", 'rooms-are-known'],
  ['src/widgets/widget.ts', 'export const widget = 1;', null],
  ['src/commands/p18.ts', "export { EXIT_STATUS } from '../index.js';", 'entries-are-not-imported'],
  ['src/questions/p19.ts', "export { readFileSync } from 'node:fs';", 'the-core-is-pure'],
  ['src/simulation/p20.ts', "export { performance } from 'node:perf_hooks';", 'the-core-is-pure'],
  ['src/statistics/p21.ts', "export { default } from 'jstat';", 'jstat-has-one-door'],
  ['src/output/p22.ts', "export { parse } from 'fast-csv';", 'fast-csv-has-one-door'],
  ['src/sampling/p23.ts', "export { default } from 'seedrandom';", 'seedrandom-has-one-door'],
  ['src/commands/p24.ts', "export { assert } from 'fast-check';", 'packages-are-dependencies'],
  ['src/commands/p25.ts', "export { nothing } from './not-there.js';", 'imports-exist'],
  ['src/study/p26.ts', "export { there } from './p27.js';\nexport const here = 1;", 'no-circles'],
  // A circle is told once, by the first of its files.
  ['src/study/p27.ts', "export { here } from './p26.js';\nexport const there = 1;", null],
];

interface Cruise {
  readonly modules: readonly { readonly source: string }[];
  readonly summary: {
    readonly violations: readonly { readonly from: string; readonly rule: { readonly name: string } }[];
  };
}

function sourceFiles(folder: string): number {
  return readdirSync(folder, { recursive: true, withFileTypes: true }).filter(({ name }) => name.endsWith('.ts'))
    .length;
}

let copy: string;
let cruise: Cruise;

beforeAll(() => {
  copy = mkdtempSync(join(tmpdir(), 'motleybank-rules-'));
  for (const part of ['src', 'workers', 'package.json', 'tsconfig.json', 'test/import-rules/rules.mjs']) {
    cpSync(join(TREE, part), join(copy, part), { recursive: true });
  }
  symlinkSync(join(TREE, 'node_modules'), join(copy, 'node_modules'), 'junction');
  for (const [path, text] of PLANTED) {
    mkdirSync(dirname(join(copy, path)), { recursive: true });
    writeFileSync(join(copy, path), `${text}\n`);
  }
  const args = [
    '--config',
    'test/import-rules/rules.mjs',
    '--preserve-symlinks',
    '--output-type',
    'json',
    'src',
    'workers',
  ];
  const run = spawnSync(process.execPath, [TOOL, ...args], { cwd: copy, encoding: 'utf8', maxBuffer: 2 ** 28 });
  cruise = JSON.parse(run.stdout);
});

afterAll(() => rmSync(copy, { recursive: true, force: true }));

describe('the import rules', () => {
  it('refuse every planted import by its rule, let pass what is allowed, and find nothing else', () => {
    const found = cruise.summary.violations.map(({ from, rule }) => `${from}: ${rule.name}`);
    const planted = PLANTED.flatMap(([path, , rule]) => (rule === null ? [] : [`${path}: ${rule}`]));
    expect([...new Set(found)].sort()).toEqual([...planted].sort());
  });

  it('look at every source file', () => {
    const seen = cruise.modules.filter(({ source }) => /^(src|workers)\/.*\.ts$/.test(source)).length;
    expect(seen).toBeGreaterThan(PLANTED.length);
    expect(seen).toBe(sourceFiles(join(copy, 'src')) + sourceFiles(join(copy, 'workers')));
  });
});
