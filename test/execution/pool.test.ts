import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { afterAll, describe, expect, it } from 'vitest';
import { LostBlock } from '../../src/execution/lost-block.js';
import { BlockPool } from '../../src/execution/pool.js';
import { Scratch } from './fake-run.js';
import { FAKE_STUDY } from './fake-study.js';

const scratch = new Scratch();
afterAll(() => scratch.remove());
const TASK = { candidate: 'strings', block: 3 };

async function poolOn(entry: string, stallMs = 60_000) {
  const folder = scratch.next();
  mkdirSync(folder, { recursive: true });
  const file = join(folder, 'entry.mjs');
  writeFileSync(file, entry);
  const retries: string[] = [];
  const pool = await BlockPool.start({
    workerFile: pathToFileURL(file),
    threads: 2,
    study: FAKE_STUDY,
    stallMs,
    onRetry: (_, reason) => retries.push(reason),
  });
  return { pool, retries };
}

describe('the pool of threads', () => {
  // Every way in which a thread can end without a reply; each must end in an error and none in waiting for ever.
  const deaths: readonly (readonly [string, string])[] = [
    ['fails to load', 'throw new Error("cannot load");'],
    ['imports what is not there', 'import "./absent.mjs";'],
    ['exits while it loads', 'process.exit(1);'],
    ['exits at work', 'export default () => process.exit(1);'],
    ['throws at work', 'export default () => { throw new Error("at work"); };'],
    [
      'throws behind its own back',
      'export default () => new Promise(() => setImmediate(() => { throw new Error("late"); }));',
    ],
    ['replies what cannot be cloned', 'export default () => () => 1;'],
  ];
  it.each(deaths)('gives a block up after three attempts if its thread %s', async (_, entry) => {
    const { pool, retries } = await poolOn(entry);
    const error = await pool.run(TASK).catch((reason: unknown) => reason);
    await pool.close();
    expect(error).toBeInstanceOf(LostBlock);
    expect(error).toMatchObject({ task: TASK });
    expect(String(error)).toContain('strings, block 3');
    expect(retries).toHaveLength(2);
  });

  it.each([
    ['hangs in a loop', 'export default () => { for (;;); };'],
    ['waits for what never comes', 'export default () => new Promise(() => undefined);'],
  ])('gives a block up after three attempts if its thread %s', async (_, entry) => {
    const { pool, retries } = await poolOn(entry, 500);
    const error = await pool.run(TASK).catch((reason: unknown) => reason);
    await pool.close();
    expect(error).toBeInstanceOf(LostBlock);
    expect(String(error)).toContain('strings, block 3: its thread ended each time: no bank was finished within 0.5 s');
    expect(retries).toHaveLength(2);
  });

  it('gives a block up whose thread runs out of memory, and the others go on', async () => {
    const { pool, retries } = await poolOn(
      `export default ({ task }) => {
        const held = [];
        while (task.block === 3) held.push(new Array(1e6).fill(1.5));
        return { csv: 'done', computeS: 0 };
      };`,
    );
    const lost = pool.run(TASK).catch((reason: unknown) => reason);
    expect(await pool.run({ ...TASK, block: 4 })).toMatchObject({ csv: 'done' });
    expect(String(await lost)).toMatch(/strings, block 3: .*out of memory/i);
    expect(retries).toHaveLength(2);
    await pool.close();
  });

  it('hands the study to every thread and tasks by name', async () => {
    const piscina = JSON.stringify(import.meta.resolve('piscina'));
    const { pool, retries } = await poolOn(
      `import { workerData } from ${piscina}; export default ({ task }) => ({ csv: JSON.stringify([workerData, task]), computeS: 0 });`,
    );
    const replies = await Promise.all([pool.run(TASK), pool.run(TASK), pool.run(TASK)]);
    await pool.close();
    for (const reply of replies) expect('csv' in reply && JSON.parse(reply.csv)).toEqual([FAKE_STUDY, TASK]);
    expect(retries).toEqual([]);
  });
});
