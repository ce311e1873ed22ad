import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { Journal, type JournalEntry, readEntries } from '../../src/execution/journal.js';
import { Scratch } from './fake-run.js';

const scratch = new Scratch();
afterAll(() => scratch.remove());

const entry = (block: number, sha256 = 'abc'): JournalEntry => ({
  candidate: 'strings',
  block,
  key: 'key',
  instances: 4,
  sha256,
  compute_s: 0.25,
});

async function journalOf(text: string) {
  const folder = scratch.next();
  mkdirSync(folder, { recursive: true });
  const path = join(folder, 'journal.jsonl');
  writeFileSync(path, text);
  return { path, journal: await Journal.open(path) };
}

describe('the journal', () => {
  it('holds one line per finished block, whole even if two are finished at once', async () => {
    const { path, journal } = await journalOf('');
    await Promise.all([1, 2, 3].map((block) => journal.append(entry(block))));
    await journal.close();
    expect(readFileSync(path, 'utf8')).toBe([1, 2, 3].map((block) => `${JSON.stringify(entry(block))}\n`).join(''));
  });

  it('drops a line that was cut off, so that the next one stands by itself', async () => {
    const { path, journal } = await journalOf(`${JSON.stringify(entry(1))}\n{"candidate":"str`);
    expect(journal.entries).toEqual([entry(1)]);
    await journal.append(entry(2));
    await journal.close();
    expect(readEntries(readFileSync(path, 'utf8'))).toEqual([entry(1), entry(2)]);
  });

  it('believes the later of two lines about one block', () => {
    const text = [entry(1, 'old'), entry(1, 'new')].map((line) => JSON.stringify(line)).join('\n');
    expect(readEntries(text)).toEqual([entry(1, 'new')]);
  });

  it.each([
    'null',
    '7',
    '{}',
    '{"candidate":"strings","block":1.5,"key":"","instances":4,"sha256":"","compute_s":0}',
    '\u0000\u0000',
  ])('passes over what is not an entry: %j', (line) => {
    expect(readEntries(`${line}\n${JSON.stringify(entry(2))}\n`)).toEqual([entry(2)]);
  });
});
