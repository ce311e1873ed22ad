import { mkdirSync, readdirSync, writeFileSync } from 'node:fs';
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

// Process numbers are bounded by 2^22 on Linux; on any system this one is not in use.
const NOBODY = 2 ** 22 + 1;

describe('the lock of a run folder', () => {
  it('keeps a second run out until it is released', async () => {
    const path = scratch.next();
    mkdirSync(path, { recursive: true });
    const release = await takeLock(path);
    await expect(takeLock(path)).rejects.toThrow(FolderRefused);
    await release();
    expect(readdirSync(path)).toEqual([]);
    await (await takeLock(path))();
  });

  it('is taken over from a process that has ended', async () => {
    const path = folderLockedBy(JSON.stringify({ pid: NOBODY, host: hostname(), started: null }));
    await (await takeLock(path))();
    expect(readdirSync(path)).toEqual([]);
  });

  it.skipIf(process.platform !== 'linux')(
    'is taken over if its process number now belongs to another process',
    async () => {
      const path = folderLockedBy(JSON.stringify({ pid: process.pid, host: hostname(), started: '1' }));
      await (await takeLock(path))();
    },
  );

  it('is taken over if it was spoilt', async () => {
    await (await takeLock(folderLockedBy('')))();
  });

  it('of another machine is left alone, and its file is named', async () => {
    const path = folderLockedBy(JSON.stringify({ pid: NOBODY, host: 'elsewhere', started: null }));
    await expect(takeLock(path)).rejects.toThrow(`on elsewhere); if it does not, remove ${join(path, LOCK)}`);
  });

  it('goes to one of several that come at once', async () => {
    const path = folderLockedBy(JSON.stringify({ pid: NOBODY, host: hostname(), started: null }));
    const taken = await Promise.allSettled(Array.from({ length: 8 }, () => takeLock(path)));
    expect(taken.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
  });
});
