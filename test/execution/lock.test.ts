import { mkdirSync, readdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { hostname } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { FolderRefused } from '../../src/execution/folder-refused.js';
import { takeLock } from '../../src/execution/lock.js';
import { Scratch } from './fake-run.js';

const LOCK = 'run.00000000-0000-4000-8000-000000000000.lock';
const scratch = new Scratch();
afterAll(() => scratch.remove());

function folderLockedBy(holder: string): string {
  const path = scratch.next();
  mkdirSync(path, { recursive: true });
  writeFileSync(join(path, LOCK), holder);
  return path;
}

/** Marks of this machine, as the lock of this process has them. */
async function marks(): Promise<{ boot: string | null; numbering: string | null }> {
  const path = scratch.next();
  mkdirSync(path, { recursive: true });
  const { release } = await takeLock(path);
  const [name = ''] = readdirSync(path);
  const { boot, numbering } = JSON.parse(readFileSync(join(path, name), 'utf8'));
  await release();
  return { boot, numbering };
}

// Process numbers are bounded by 2^22 on Linux; on any system this one is not in use.
const NOBODY = 2 ** 22 + 1;

describe('the lock of a run folder', () => {
  it('keeps a second run out until it is released', async () => {
    const path = scratch.next();
    mkdirSync(path, { recursive: true });
    const { release, isHeld } = await takeLock(path);
    await expect(takeLock(path)).rejects.toThrow(FolderRefused);
    expect(isHeld()).toBe(true);
    await release();
    expect(readdirSync(path)).toEqual([]);
    await (await takeLock(path)).release();
  });

  it('is taken over from a process that has ended', async () => {
    const path = folderLockedBy(JSON.stringify({ pid: NOBODY, host: hostname(), ...(await marks()), started: null }));
    await (await takeLock(path)).release();
    expect(readdirSync(path)).toEqual([]);
  });

  it.skipIf(process.platform !== 'linux')(
    'is taken over if its process number now belongs to another process',
    async () => {
      const path = folderLockedBy(
        JSON.stringify({ pid: process.pid, host: hostname(), ...(await marks()), started: '1' }),
      );
      await (await takeLock(path)).release();
    },
  );

  it.skipIf(process.platform !== 'linux')(
    'is taken over if the machine was started anew since, and left alone if it is of another container',
    async () => {
      const mine = { pid: NOBODY, host: hostname(), ...(await marks()), started: null };
      await (await takeLock(folderLockedBy(JSON.stringify({ ...mine, pid: process.pid, boot: 'before' })))).release();
      const elsewhere = folderLockedBy(JSON.stringify({ ...mine, numbering: 'pid:[1]' }));
      await expect(takeLock(elsewhere)).rejects.toThrow('is held by a run that goes on');
    },
  );

  it('is lost with its folder', async () => {
    const path = scratch.next();
    mkdirSync(path, { recursive: true });
    const { isHeld, release } = await takeLock(path);
    renameSync(path, `${path} moved`);
    expect(isHeld()).toBe(false);
    await release();
  });

  it('is taken over if it was spoilt', async () => {
    await (await takeLock(folderLockedBy(''))).release();
  });

  it('of another machine is left alone, and its file is named', async () => {
    const path = folderLockedBy(JSON.stringify({ pid: NOBODY, host: 'elsewhere', started: null }));
    await expect(takeLock(path)).rejects.toThrow(`on elsewhere); if it does not, remove ${join(path, LOCK)}`);
  });

  it('goes to one of several that come at once', async () => {
    const path = folderLockedBy(JSON.stringify({ pid: NOBODY, host: hostname(), ...(await marks()), started: null }));
    const taken = await Promise.allSettled(Array.from({ length: 8 }, () => takeLock(path)));
    expect(taken.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
  });
});
