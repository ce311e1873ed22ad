import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { Scratch } from '../execution/fake-run.js';
import { FakeCli, finishedBlocks, SLOW_BLOCKS, SLOW_STUDY, untilBlocks } from './fake-cli.js';

let cli: FakeCli;
const scratch = new Scratch();

beforeAll(() => {
  cli = new FakeCli();
});
afterAll(() => {
  cli.remove();
  scratch.remove();
});

describe('the program', () => {
  it.each([
    ['SIGHUP', 129],
    ['SIGINT', 130],
    ['SIGTERM', 143],
  ] as const)('ends by %s with its status after the blocks in flight, and loses none', async (signal, status) => {
    const folder = scratch.next();
    const results = join(folder, 'results', 'cabin');
    const run = cli.run(folder, ['--quiet']);
    await untilBlocks(run, results, 4);
    run.child.kill(signal);
    expect(await run.end).toEqual({ status, signal: null });
    expect(run.notes()).toMatch(
      /^interrupted with \d+ of 40 banks in every candidate: the results are of those; \d+ blocks missing/,
    );
    const kept = finishedBlocks(results);
    expect(kept).toBeGreaterThanOrEqual(4);
    expect(kept).toBeLessThan(SLOW_BLOCKS);
    const record = JSON.parse(readFileSync(join(results, 'run.json'), 'utf8'));
    expect(record.sessions).toMatchObject([{ ended: 'interrupted' }]);
    const summary = readFileSync(join(results, 'summary.csv'), 'utf8');
    expect(summary).toContain('strings,lost_capacity,');
  });

  it.each([
    ['SIGINT', 'SIGINT', 130],
    ['SIGINT', 'SIGTERM', 143],
    ['SIGHUP', 'SIGHUP', 129],
  ] as const)('ends at once by %s and %s, and is taken up again', async (first, second, status) => {
    const folder = scratch.next();
    const results = join(folder, 'results', 'cabin');
    // A block takes 8 s: whoever waited for it would be seen.
    const slow = SLOW_STUDY.replace('slow 50', 'slow 2000');
    const run = cli.run(folder, ['--quiet'], slow);
    await untilBlocks(run, results, 1);
    run.child.kill(first);
    await new Promise((resolve) => setTimeout(resolve, 300));
    expect(run.child.exitCode).toBeNull();
    run.child.kill(second);
    expect(await run.end).toEqual({ status, signal: null });
    expect(run.notes()).toBe('');
    // The lock of the process that has gone keeps nobody out.
    const again = cli.run(folder, ['--quiet'], SLOW_STUDY.replace('slow 50', 'slow 0'));
    expect(await again.end).toEqual({ status: 0, signal: null });
    expect(finishedBlocks(results)).toBe(SLOW_BLOCKS);
  });
});
