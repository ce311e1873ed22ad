import { spawnSync } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

// Threads can only be started from compiled files: these tests run the build that `npm test` makes first.
const CLI = fileURLToPath(new URL('../../dist/src/cli.js', import.meta.url));

/** Left out of the contract: the order of finished blocks, and how long they took. */
const NOT_THE_RESULT = ['journal.jsonl', 'run.json'];

const STUDY = `motleybank: 1
title: Two strings for a test (invented)
seed: 0
instances: 12
block: 4
cycles: 8
stock:
  new: {grade: new-same-make, modules: [A1, A2], rated_Ah: 100}
  old: {grade: older, modules: [B1, B2], rated_Ah: 100}
duty:
  phases: [{discharge_W: 800, for_h: 4}, {rest_h: 1}, {charge: to-full, at_most_h: 8}]
  load_factor: {nominal: 1, bank_sd_percent: 10}
candidates:
  apart: {wiring: strings, modules: [[A1, A2], [B1, B2]]}
  tied: {wiring: cross-linked, modules: [[A1, A2], [B1, B2]], link_mOhm: 1}
`;

function run(
  threads: number,
  more: readonly string[] = [],
  study = STUDY,
  folder = join(mkdtempSync(join(tmpdir(), 'motleybank-real-')), 'out'),
): { folder: string; table: string } {
  const place = dirname(folder);
  writeFileSync(join(place, 'study.yaml'), study);
  const words = [CLI, 'run', 'study.yaml', '--out', 'out', '--threads', String(threads), '--quiet', ...more];
  const { status, stdout, stderr } = spawnSync(process.execPath, words, { cwd: place, encoding: 'utf8' });
  expect(stderr).toBe('');
  expect(status).toBe(0);
  return { folder, table: stdout };
}

function contents(folder: string): Record<string, string> {
  const names = readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && !NOT_THE_RESULT.includes(entry.name))
    .map((entry) => join(entry.parentPath, entry.name));
  return Object.fromEntries(names.map((name) => [name.slice(folder.length), readFileSync(name, 'utf8')]));
}

describe('a run of the real engine', () => {
  it('leaves the same bytes on 1, 2 and 3 threads, with seed 0', () => {
    const one = run(1);
    const results = contents(one.folder);
    expect(Object.keys(results).length).toBeGreaterThan(12);
    for (const threads of [2, 3]) {
      const other = run(threads);
      expect(other.table).toBe(one.table);
      expect(contents(other.folder)).toEqual(results);
    }
  }, 120_000);

  it.each(['latin-hypercube', 'sobol'])(
    'leaves the same bytes under the plan %s, in one go and taken up',
    (plan) => {
      const one = run(1, [], `${STUDY}plan: ${plan}\n`);
      const parts = run(3, ['--instances', '4'], `${STUDY}plan: ${plan}\n`);
      const whole = run(3, [], `${STUDY}plan: ${plan}\n`, parts.folder);
      expect(whole.table).toBe(one.table);
      expect(contents(whole.folder)).toEqual(contents(one.folder));
    },
    120_000,
  );

  it('draws other banks from another seed', () => {
    const block = join('outcomes', 'apart', 'block-0001.csv');
    const first = readFileSync(join(run(2).folder, block), 'utf8');
    const second = readFileSync(join(run(2, ['--seed', '1']).folder, block), 'utf8');
    expect(second).not.toBe(first);
  }, 120_000);
});
