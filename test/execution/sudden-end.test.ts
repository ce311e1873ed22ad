import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { fakeRun, outcomeFiles, Scratch } from './fake-run.js';
import { FAKE_STUDY } from './fake-study.js';
import { compileWithFakeEngine, type FakeProgram } from './program-with-fake-engine.js';

let program: FakeProgram;
const scratch = new Scratch();
const CHILD = 'test/execution/run-child.ts';

beforeAll(() => {
  program = compileWithFakeEngine([CHILD]);
});
afterAll(() => {
  program.remove();
  scratch.remove();
});

function journalLines(path: string): number {
  const journal = join(path, 'journal.jsonl');
  return existsSync(journal) ? readFileSync(journal, 'utf8').split('\n').length - 1 : 0;
}

function locks(path: string): string[] {
  return readdirSync(path).filter((name) => name.endsWith('.lock'));
}

/** Starts a slow run in a process group of its own and waits until it has kept some blocks. */
async function startedRun(path: string, blocks: number) {
  const worker = fileURLToPath(program.workerFile);
  const child = spawn(process.execPath, [program.compiled(CHILD), path, worker, '40'], {
    detached: true,
    stdio: ['ignore', 'ignore', 'inherit'],
  });
  const ended = once(child, 'exit');
  while (journalLines(path) < blocks && child.exitCode === null) await pause(10);
  const { pid } = child;
  if (pid === undefined || child.exitCode !== null) throw new Error('the run ended before it could be killed');
  return { kill: () => process.kill(-pid, 'SIGKILL'), ended };
}

describe('a run whose process group is killed', () => {
  it('is taken up without losing a finished block and ends as if undisturbed', async () => {
    const path = scratch.next();
    const { kill, ended } = await startedRun(path, 3);
    kill();
    await ended;
    const kept = journalLines(path);
    expect(kept).toBeGreaterThanOrEqual(3);
    expect(kept).toBeLessThan(10);
    expect(locks(path)).toHaveLength(1);

    const again = await fakeRun(path, FAKE_STUDY, { workerFile: program.workerFile, threads: 2 });
    expect(again).toMatchObject({ found: kept, computed: 10 - kept, instances: 14, notes: '' });
    const other = scratch.next();
    await fakeRun(other, FAKE_STUDY, { workerFile: program.workerFile, threads: 1 });
    expect(outcomeFiles(path)).toEqual(outcomeFiles(other));
    expect(locks(path)).toEqual([]);
  });

  it('keeps others out as long as it lives', async () => {
    const path = scratch.next();
    const { kill, ended } = await startedRun(path, 1);
    try {
      const second = fakeRun(path, FAKE_STUDY, { workerFile: program.workerFile, threads: 1 });
      await expect(second).rejects.toThrow('is held by a run that goes on');
    } finally {
      kill();
      await ended;
    }
  });
});
