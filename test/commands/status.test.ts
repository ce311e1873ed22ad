import { type ChildProcess, spawn, spawnSync } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { Scratch } from '../execution/fake-run.js';
import { compileWithFakeEngine, type FakeProgram } from '../execution/program-with-fake-engine.js';

// 8 blocks of 4 banks and a twin for each of 2 candidates, a tenth of a second a bank.
const STUDY = `motleybank: 1
title: slow 100
seed: 7
instances: 32
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
const BLOCKS = 18;

let program: FakeProgram;
const scratch = new Scratch();
beforeAll(() => {
  program = compileWithFakeEngine(['src/cli.ts']);
});
afterAll(() => {
  program.remove();
  scratch.remove();
});

function newHome(): string {
  const home = scratch.next();
  mkdirSync(home, { recursive: true });
  writeFileSync(join(home, 'cabin.yaml'), STUDY);
  return home;
}

const args = (...words: readonly string[]) => [program.compiled('src/cli.ts'), ...words];
const RUN = ['run', 'cabin.yaml', '--threads', '2', '--quiet', '--out', 'out', '--log', 'log.jsonl'];

function start(home: string): ChildProcess {
  return spawn(process.execPath, args(...RUN), { cwd: home, stdio: 'ignore' });
}

function ended(home: string, ...words: readonly string[]) {
  const { status, stdout, stderr } = spawnSync(process.execPath, args(...words), { cwd: home, encoding: 'utf8' });
  return { status, out: stdout, err: stderr };
}

function finishedBlocks(home: string): number {
  const journal = join(home, 'out', 'journal.jsonl');
  return existsSync(journal) ? readFileSync(journal, 'utf8').split('"block":').length - 1 : 0;
}

describe('the status of a folder', () => {
  it('tells a run that goes on, one that was killed and one that is complete', async () => {
    const home = newHome();
    const child = start(home);
    const exit = once(child, 'close');
    while (finishedBlocks(home) < 5 && child.exitCode === null) await pause(10);

    const running = ended(home, 'status', 'out');
    expect(running.status).toBe(6);
    expect(running.out).toMatch(
      new RegExp(`^out: running \\(process ${child.pid} on .*\\), session of .* on 2 threads\n`),
    );
    expect(running.out).toMatch(/^\d+ of 18 blocks, the latest 0:0\d ago; \d+ of 32 banks in every candidate$/m);
    expect(running.out).toMatch(/^ {2}turned {3}\d of 9 blocks\nabout 0:0\d left on that many threads\n$/m);

    child.kill('SIGKILL');
    await exit;
    const before = readdirSync(join(home, 'out'), { recursive: true }).sort();
    const dead = ended(home, 'status', 'out', '--json');
    const document = JSON.parse(dead.out);
    expect(dead.status).toBe(5);
    expect(document).toMatchObject({ standing: 'dead', holder: null, blocks_total: BLOCKS, instances_total: 32 });
    expect(document.blocks_done).toBe(finishedBlocks(home));
    expect(ended(home, 'status', 'out').out).toMatch(/^out: dead: .*\n(.*\n)*the same command as before takes up/);
    // Looking changes nothing, not even the lock of the dead.
    expect(readdirSync(join(home, 'out'), { recursive: true }).sort()).toEqual(before);

    expect(ended(home, ...RUN).status).toBe(0);
    expect(ended(home, 'status', 'out')).toMatchObject({
      status: 0,
      out: expect.stringMatching(/^out: complete, session of .*\n18 of 18 blocks, .*; 32 of 32 banks/),
    });

    const log = readFileSync(join(home, 'log.jsonl'), 'utf8').trimEnd().split('\n');
    expect(log.map((line) => JSON.parse(line))).toMatchObject([
      { event: 'started', study: 'cabin.yaml', folder: 'out', threads: 2, candidates: ['strings', 'turned'] },
      { event: 'started' },
      { event: 'ended', how: 'complete', instances: 32, blocks_missing: 0 },
    ]);
  });

  it('is 2 with one message for what is no folder of a run, and for a spoilt one', () => {
    const home = newHome();
    const refused = (path: string) => {
      const { status, err } = ended(home, 'status', path);
      expect(status).toBe(2);
      return err;
    };
    expect(refused('none')).toBe('none is not the folder of a run: it has no study.resolved.json\n');
    expect(refused('cabin.yaml')).toBe('cabin.yaml is not the folder of a run: it has no study.resolved.json\n');
    mkdirSync(join(home, 'spoilt'));
    for (const text of ['{', 'null', '{}', '{"candidates": [{}]}']) {
      writeFileSync(join(home, 'spoilt', 'study.resolved.json'), text);
      expect(refused('spoilt')).toMatch(
        /^spoilt.study\.resolved\.json is not as a run left it; run the study again\n$/,
      );
    }
  });

  it('of a log that cannot be written is that of input', () => {
    const home = newHome();
    const { status, err } = ended(home, ...RUN.slice(0, -1), join('cabin.yaml', 'log.jsonl'));
    expect([status, err]).toEqual([2, expect.stringMatching(/^cabin\.yaml.log\.jsonl cannot be written: \S.*\n$/)]);
  });
});
