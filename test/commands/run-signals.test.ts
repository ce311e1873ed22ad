import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { Scratch } from '../execution/fake-run.js';
import { compileWithFakeEngine, type FakeProgram } from '../execution/program-with-fake-engine.js';

// 10 blocks of 4 banks for each of 2 candidates, a fifth of a second each.
const STUDY = `motleybank: 1
title: slow 50
seed: 7
instances: 40
block: 4
cycles: 3
stock:
  newer: {grade: new-same-make, modules: [N1, N2], cells_in_series: 4, capacity_Ah: {nominal: 100}}
bank:
  charger: {limit_A: 60, absorption_V: 28.4, until: {tail_A: 4}, float_V: 27.2}
duty:
  phases: [{rest_h: 1}]
candidates:
  strings: {wiring: strings, modules: [[N1, N2]]}
  turned: {wiring: strings, modules: [[N2, N1]]}
reference: strings
`;
const BLOCKS = 22; // with the twins

let program: FakeProgram;
const scratch = new Scratch();

beforeAll(() => {
  program = compileWithFakeEngine(['src/cli.ts']);
});
afterAll(() => {
  program.remove();
  scratch.remove();
});

function start(folder: string): ChildProcess {
  mkdirSync(folder, { recursive: true });
  writeFileSync(join(folder, 'cabin.yaml'), STUDY);
  const args = [program.compiled('src/cli.ts'), 'run', 'cabin.yaml', '--threads', '2', '--quiet'];
  return spawn(process.execPath, args, { cwd: folder, stdio: ['ignore', 'ignore', 'pipe'] });
}

function finishedBlocks(folder: string): number {
  const journal = join(folder, 'results', 'cabin', 'journal.jsonl');
  return existsSync(journal) ? readFileSync(journal, 'utf8').split('\n').length - 1 : 0;
}

describe('the program', () => {
  it.each([
    ['SIGINT', 130],
    ['SIGTERM', 143],
  ] as const)('ends by %s with its status after the blocks in flight, and loses none', async (signal, status) => {
    const folder = scratch.next();
    const child = start(folder);
    const exit = once(child, 'close');
    let notes = '';
    child.stderr?.on('data', (chunk) => {
      notes += chunk;
    });
    while (finishedBlocks(folder) < 4 && child.exitCode === null) await pause(10);
    child.kill(signal);
    expect(await exit).toEqual([status, null]);
    expect(notes).toMatch(
      /^interrupted with \d+ of 40 banks in every candidate: the results are of those; \d+ blocks missing/,
    );
    const kept = finishedBlocks(folder);
    expect(kept).toBeGreaterThanOrEqual(4);
    expect(kept).toBeLessThan(BLOCKS);
    const record = JSON.parse(readFileSync(join(folder, 'results', 'cabin', 'run.json'), 'utf8'));
    expect(record.sessions).toMatchObject([{ ended: 'interrupted' }]);
    const summary = readFileSync(join(folder, 'results', 'cabin', 'summary.csv'), 'utf8');
    expect(summary).toContain('strings,lost_capacity,');
  });
});
