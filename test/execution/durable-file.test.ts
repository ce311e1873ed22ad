import { mkdirSync, readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { writeDurably } from '../../src/execution/durable-file.js';
import { errorCode } from '../../src/execution/system-error.js';
import { Scratch } from './fake-run.js';

const scratch = new Scratch();
afterAll(() => scratch.remove());

describe('a file written durably', () => {
  it('replaces an earlier one and leaves nothing beside it', async () => {
    const folder = scratch.next();
    mkdirSync(folder, { recursive: true });
    await writeDurably(join(folder, 'a.csv'), 'one\r\n');
    await writeDurably(join(folder, 'a.csv'), 'zwö\r\n');
    expect(readdirSync(folder)).toEqual(['a.csv']);
    expect(readFileSync(join(folder, 'a.csv'), 'utf8')).toBe('zwö\r\n');
  });

  it('fails with the system error if its folder is missing', async () => {
    const error = await writeDurably(join(scratch.next(), 'a.csv'), '').catch((reason: unknown) => reason);
    expect(errorCode(error)).toBe('ENOENT');
  });
});
