import { appendFileSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { InstanceFault } from '../../src/execution/instance-fault.js';
import { LostBlock } from '../../src/execution/lost-block.js';
import { fakeRun, outcomeFiles, Scratch } from './fake-run.js';
import { FAKE_STUDY, NATIVE } from './fake-study.js';
import { compileWithFakeEngine, type FakeProgram } from './program-with-fake-engine.js';

let program: FakeProgram;
const scratch = new Scratch();
const BLOCKS = 10; // by hand: 2 candidates x (1 twin + 4 blocks of at most 4 for 14 instances)

beforeAll(() => {
  program = compileWithFakeEngine();
});
afterAll(() => {
  program.remove();
  scratch.remove();
});

function run(path: string, study = FAKE_STUDY, threads = 2) {
  return fakeRun(path, study, { workerFile: program.workerFile, threads });
}

async function undisturbed(study = FAKE_STUDY) {
  const path = scratch.next();
  await run(path, study);
  return outcomeFiles(path);
}

describe('a run', () => {
  it('leaves the same bytes with one, two and three threads', async () => {
    const [one, two, three] = [scratch.next(), scratch.next(), scratch.next()];
    expect(await run(one, FAKE_STUDY, 1)).toMatchObject({ instances: 14, computed: BLOCKS, missing: 0, notes: '' });
    await run(two, FAKE_STUDY, 2);
    await run(three, FAKE_STUDY, 3);
    expect(Object.keys(outcomeFiles(one))).toEqual(
      ['cross-linked', 'strings'].flatMap((key) =>
        ['block-0001.csv', 'block-0002.csv', 'block-0003.csv', 'block-0004.csv', 'twin.csv'].map((name) =>
          join(key, name),
        ),
      ),
    );
    expect(outcomeFiles(two)).toEqual(outcomeFiles(one));
    expect(outcomeFiles(three)).toEqual(outcomeFiles(one));
  });

  it('computes nothing when all is there', async () => {
    const path = scratch.next();
    await run(path);
    expect(await run(path)).toMatchObject({ instances: 14, found: BLOCKS, computed: 0, missing: 0 });
  });

  it('stopped, finishes the blocks in flight, and taken up again equals one that was not', async () => {
    const path = scratch.next();
    const first = await fakeRun(path, FAKE_STUDY, { workerFile: program.workerFile, threads: 2, stopAfter: 3 });
    expect(first.failure).toBeUndefined();
    // Three blocks, and at most one more that the other thread had in flight.
    expect([3, 4]).toContain(first.computed);
    expect(first.computed + first.missing).toBe(BLOCKS);
    expect(await run(path)).toMatchObject({ found: first.computed, computed: first.missing, instances: 14 });
    expect(outcomeFiles(path)).toEqual(await undisturbed());
  });

  it('for more instances computes only the addition, and what was there stays as it was', async () => {
    const path = scratch.next();
    await run(path);
    const before = outcomeFiles(path);
    const more = { ...FAKE_STUDY, instances: 24 };
    // By hand: 6 blocks per candidate; blocks 5 and 6 are new and block 4 had 2 of its 4 rows.
    expect(await run(path, more)).toMatchObject({ instances: 24, computed: 6 });
    expect(outcomeFiles(path)).toEqual(await undisturbed(more));
    for (const [name, text] of Object.entries(before)) expect(outcomeFiles(path)[name]?.startsWith(text)).toBe(true);
  });

  it('for fewer instances computes nothing', async () => {
    const path = scratch.next();
    await run(path);
    expect(await run(path, { ...FAKE_STUDY, instances: 6 })).toMatchObject({ instances: 6, computed: 0, missing: 0 });
  });

  it('for one more candidate computes only that', async () => {
    const path = scratch.next();
    await run(path);
    const more = { ...FAKE_STUDY, candidates: [...FAKE_STUDY.candidates, NATIVE] };
    expect(await run(path, more)).toMatchObject({ found: BLOCKS, computed: 5 });
    expect(outcomeFiles(path)).toEqual(await undisturbed(more));
  });

  it('finds a damaged block and a lost one and computes them again', async () => {
    const path = scratch.next();
    await run(path);
    const damaged = join(path, 'outcomes', 'strings', 'block-0002.csv');
    const text = readFileSync(damaged, 'utf8');
    writeFileSync(
      damaged,
      text.replace(/\d(?=\r\n$)/, (digit) => String((Number(digit) + 1) % 10)),
    );
    expect(readFileSync(damaged, 'utf8')).not.toBe(text);
    rmSync(join(path, 'outcomes', 'cross-linked', 'twin.csv'));
    const again = await run(path);
    expect(again).toMatchObject({ computed: 2, missing: 0 });
    expect(again.notes).toContain('outcomes/strings/block-0002.csv is not as it was written');
    expect(again.notes).toContain('outcomes/cross-linked/twin.csv is not as it was written');
    expect(outcomeFiles(path)).toEqual(await undisturbed());
  });

  it('computes a block again whose journal line was cut off, and no other', async () => {
    const path = scratch.next();
    await run(path);
    const journal = join(path, 'journal.jsonl');
    writeFileSync(journal, readFileSync(journal, 'utf8').slice(0, -10));
    expect(await run(path)).toMatchObject({ found: BLOCKS - 1, computed: 1 });
    expect(await run(path)).toMatchObject({ found: BLOCKS, computed: 0 });
  });

  it('does not take the blocks of another study for its own', async () => {
    const path = scratch.next();
    await run(path);
    expect(await run(path, { ...FAKE_STUDY, seed: '1' })).toMatchObject({ found: 0, computed: BLOCKS });
  });

  it('tries a block again whose thread ended, and its bytes are the same', async () => {
    const path = scratch.next();
    const once = { ...FAKE_STUDY, title: `exit-once strings 6 ${scratch.next().replaceAll(' ', '-')}` };
    const execution = await run(path, once);
    expect(execution).toMatchObject({ computed: BLOCKS, missing: 0, failure: undefined });
    expect(execution.notes).toMatch(/^strings, block 2: its thread ended \(.+\); trying again\n$/);
    expect(outcomeFiles(path)).toEqual(await undisturbed());
  });

  it('gives up a block whose thread ends each time, with its address, and keeps the rest', async () => {
    const path = scratch.next();
    const execution = await run(path, { ...FAKE_STUDY, title: 'exit strings 6' });
    expect(execution.failure).toBeInstanceOf(LostBlock);
    expect(String(execution.failure)).toContain('strings, block 2: its thread ended each time');
    expect(execution.notes.match(/trying again/g)).toHaveLength(2);
    // Block 1 of both candidates was finished: it may be summarised, and block 3 beyond the gap may not.
    expect(execution.instances).toBe(4);
    expect(await run(path)).toMatchObject({ found: execution.computed, missing: 0, instances: 14 });
    expect(outcomeFiles(path)).toEqual(await undisturbed());
  });

  it.each([
    ['throw', 'cross-linked, instance 5: no convergence'],
    ['not-finite', 'cross-linked, instance 5: lost_capacity is Infinity'],
  ])('ends with the address of an instance that fails (%s), without trying again', async (deed, message) => {
    const execution = await run(scratch.next(), { ...FAKE_STUDY, title: `${deed} cross-linked 5` });
    expect(execution.failure).toBeInstanceOf(InstanceFault);
    expect(execution.failure).toMatchObject({ candidate: 'cross-linked', instance: 5, message });
    expect(execution.notes).toBe('');
  });

  it('ends with the address of an instance that does not converge, and does not keep its block', async () => {
    const path = scratch.next();
    const execution = await run(path, { ...FAKE_STUDY, title: 'diverge cross-linked 6' });
    expect(execution.failure).toMatchObject({ candidate: 'cross-linked', instance: 6 });
    expect(String(execution.failure)).toContain('cross-linked, instance 6: bank 6 did not settle');
    expect(outcomeFiles(path)[join('cross-linked', 'block-0002.csv')]).toBeUndefined();
  });

  it('within an allowed share counts instances that do not converge and makes no row of them', async () => {
    const path = scratch.next();
    const study = { ...FAKE_STUDY, title: 'diverge cross-linked 5+8+14' };
    const options = { workerFile: program.workerFile, threads: 2 };
    // By hand: 3 of 14 may fail at 0.22 (3.08) and not at 0.21 (2.94).
    const tooFew = await fakeRun(path, study, { ...options, mayFailFraction: 0.21 });
    expect(tooFew.failure).toBeInstanceOf(InstanceFault);
    const enough = await fakeRun(path, study, { ...options, mayFailFraction: 0.22 });
    const failed = [5, 8, 14].map((instance) => ({
      candidate: 'cross-linked',
      instance,
      message: `bank ${instance} did not settle`,
    }));
    expect(enough).toMatchObject({ failure: undefined, missing: 0, instances: 14, failed });
    const rows = outcomeFiles(path)[join('cross-linked', 'block-0002.csv')]?.split('\r\n') ?? [];
    expect(rows.slice(1, -1).map((row) => row.split(',')[0])).toEqual(['6', '7']);
    // Taken up, the folder tells the same; with less allowed the blocks are computed again and fail again.
    expect(await fakeRun(path, study, { ...options, mayFailFraction: 0.22 })).toMatchObject({ computed: 0, failed });
    expect((await fakeRun(path, study, options)).failure).toBeInstanceOf(InstanceFault);
    // Once the simulation converges, a run that allows none mends the folder.
    expect(await run(path)).toMatchObject({ failure: undefined, failed: [] });
    expect(outcomeFiles(path)).toEqual(await undisturbed());
  });

  it('does not write a finished block again', async () => {
    const path = scratch.next();
    await run(path);
    const block = join(path, 'outcomes', 'strings', 'block-0001.csv');
    const before = statSync(block).mtimeMs;
    appendFileSync(join(path, 'outcomes', 'strings', 'block-0002.csv'), ' ');
    await run(path);
    expect(statSync(block).mtimeMs).toBe(before);
  });
});
