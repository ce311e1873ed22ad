import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { FolderRefused } from '../../src/execution/folder-refused.js';
import { RunFolder } from '../../src/execution/run-folder.js';
import { Scratch } from './fake-run.js';
import { unwritableFolder } from './unwritable-folder.js';

const scratch = new Scratch();
afterAll(() => scratch.remove());

function folderWith(...names: string[]): string {
  const path = scratch.next();
  mkdirSync(path, { recursive: true });
  for (const name of names) writeFileSync(join(path, name), 'mine');
  return path;
}

describe('the folder of a run', () => {
  it('is made where there is none, with the folders above it', async () => {
    const path = join(scratch.next(), 'results', 'demo');
    const folder = await RunFolder.open(path, []);
    await folder.write('inputs/01-week.csv', 'time_h\n');
    await folder.close();
    expect(readFileSync(join(path, 'inputs', '01-week.csv'), 'utf8')).toBe('time_h\n');
  });

  it('is never one that holds something else, not even to discard it', async () => {
    const path = folderWith('holiday.jpg');
    await expect(RunFolder.open(path, [])).rejects.toThrow('is not the folder of a run: it holds holiday.jpg');
    await expect(RunFolder.open(path, ['outcomes'])).rejects.toThrow(FolderRefused);
    expect(readdirSync(path)).toEqual(['holiday.jpg']);
  });

  it('is not a file', async () => {
    await expect(RunFolder.open(join(folderWith('a'), 'a'), [])).rejects.toThrow('cannot be used');
  });

  it.runIf(process.platform === 'linux')('is not one that cannot be written, which is told and no fault', async () => {
    const path = unwritableFolder(scratch.next());
    await expect(RunFolder.open(path, ['outcomes'])).rejects.toThrow(FolderRefused);
    await expect(RunFolder.open(path, [])).rejects.toThrow(/cannot be used: ENAMETOOLONG/);
    expect(readdirSync(path)).toEqual([]);
  });

  it('is not one whose journal cannot be opened, and is free again', async () => {
    const path = scratch.next();
    mkdirSync(join(path, 'journal.jsonl'), { recursive: true });
    await expect(RunFolder.open(path, [])).rejects.toThrow(/cannot be used: EISDIR/);
    expect(readdirSync(path)).toEqual(['journal.jsonl']);
  });

  it('loses what is to be discarded and nothing else', async () => {
    const path = folderWith('journal.jsonl', 'summary.csv', 'notes.txt');
    await (await RunFolder.open(path, ['journal.jsonl', 'summary.csv'])).close();
    expect(existsSync(join(path, 'summary.csv'))).toBe(false);
    expect(readFileSync(join(path, 'journal.jsonl'), 'utf8')).toBe('');
    expect(readFileSync(join(path, 'notes.txt'), 'utf8')).toBe('mine');
  });

  it('reads a file that is not there as nothing', async () => {
    const folder = await RunFolder.open(scratch.next(), []);
    expect(await folder.read('study.resolved.json')).toBeUndefined();
    await folder.close();
  });
});
