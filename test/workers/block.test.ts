import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { BlockPool } from '../../src/execution/pool.js';
import { type BlockReply, outcomeLayout, TWIN_BLOCK } from '../../src/outcomes/block.js';
import { decodeBlock } from '../../src/outcomes/block-csv.js';
import { outcomeColumns } from '../../src/outcomes/columns.js';
import type { Study } from '../../src/study/study.js';
import { FAKE_STUDY } from '../execution/fake-study.js';
import { compileWithFakeEngine, type FakeProgram } from '../execution/program-with-fake-engine.js';

let program: FakeProgram;
beforeAll(() => {
  program = compileWithFakeEngine();
});
afterAll(() => program.remove());

async function replyTo(block: number, study: Study = FAKE_STUDY): Promise<BlockReply> {
  const { workerFile } = program;
  const pool = await BlockPool.start({ workerFile, threads: 1, study, stallMs: 60_000, onRetry: () => undefined });
  try {
    return await pool.run({ candidate: 'strings', block });
  } finally {
    await pool.close();
  }
}

function instancesIn(reply: BlockReply, first: number, last: number): number[] {
  if ('fault' in reply) throw new Error(reply.fault.message);
  const [candidate] = FAKE_STUDY.candidates;
  if (candidate === undefined) throw new Error('the fake study has candidates');
  const columns = outcomeColumns(outcomeLayout(FAKE_STUDY, candidate));
  return decodeBlock(columns, { first, last }, reply.csv).map(({ instance }) => instance);
}

describe('the thread entry', () => {
  it('replies the instances of its block, fewer in the last one', async () => {
    expect(instancesIn(await replyTo(2), 5, 8)).toEqual([5, 6, 7, 8]);
    const last = await replyTo(4);
    expect(instancesIn(last, 13, 14)).toEqual([13, 14]);
    expect(() => instancesIn(last, 13, 15)).toThrow('2 rows where 3 are due');
  });

  it('replies the twin as block 0', async () => {
    expect(instancesIn(await replyTo(TWIN_BLOCK), 0, 0)).toEqual([0]);
  });

  it('tells the instance that fails and where in the simulation it does', async () => {
    const reply = await replyTo(2, { ...FAKE_STUDY, title: 'throw strings 7' });
    expect(reply).toMatchObject({ fault: { instance: 7, message: 'no convergence' } });
    expect('fault' in reply && reply.fault.stack).toMatch(/simulate-instance\.js:\d+/);
  });

  it('tells the instance whose outcome is not finite', async () => {
    const reply = await replyTo(2, { ...FAKE_STUDY, title: 'not-finite strings 6' });
    expect(reply).toMatchObject({ fault: { instance: 6, message: 'lost_capacity is Infinity' } });
  });

  it('tells a twin that fails as instance 0', async () => {
    const reply = await replyTo(TWIN_BLOCK, { ...FAKE_STUDY, title: 'throw strings 0' });
    expect(reply).toMatchObject({ fault: { instance: 0, message: 'no convergence' } });
  });

  it('blames the twin, not the first instance, if a candidate cannot be got ready', async () => {
    const reply = await replyTo(2, { ...FAKE_STUDY, title: 'throw-ready strings' });
    expect(reply).toMatchObject({ fault: { instance: 0, message: 'no convergence of the twin' } });
  });
});
