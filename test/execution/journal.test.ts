import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { Journal, type JournalEntry, journalLine, readJournal } from '../../src/execution/journal.js';
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
    expect(readFileSync(path, 'utf8')).toBe([1, 2, 3].map((block) => journalLine(entry(block))).join(''));
  });

  it('drops a line that was cut off, so that the next one stands by itself', async () => {
    const { path, journal } = await journalOf(`${journalLine(entry(1))}{"candidate":"str`);
    expect(journal.contents).toEqual({ entries: [entry(1)], study: null, damagedLines: [] });
    await journal.append(entry(2));
    await journal.close();
    expect(readJournal(readFileSync(path, 'utf8')).entries).toEqual([entry(1), entry(2)]);
  });

  it('believes the later of two lines about one block', () => {
    const text = [entry(1, 'old'), entry(1, 'new')].map(journalLine).join('');
    expect(readJournal(text).entries).toEqual([entry(1, 'new')]);
  });

  it('tells the checksum of the resolved study, the later of two', () => {
    const text = [{ study: 'one' }, entry(1), { study: 'two' }].map(journalLine).join('');
    expect(readJournal(text)).toEqual({ entries: [entry(1)], study: 'two', damagedLines: [] });
  });

  it('writes a line with a checksum of its own', () => {
    // The digits are those of sha256sum of coreutils 9.1 for the line without them: printf '{"study":"one"}' | sha256sum
    expect(journalLine({ study: 'one' })).toBe('{"study":"one","check":"4ec913c7eea89659"}\n');
  });

  it('finds every flipped bit, and believes all other lines', () => {
    const lines = [entry(1), { study: 'abc' }, entry(2)].map(journalLine);
    const whole = Buffer.from(lines.join(''));
    const second = [lines[0]?.length ?? 0, (lines[0]?.length ?? 0) + (lines[1]?.length ?? 0)] as const;
    for (let bit = second[0] * 8; bit < second[1] * 8 - 8; bit++) {
      const flipped = Buffer.from(whole);
      flipped.writeUInt8(flipped.readUInt8(bit >> 3) ^ (1 << (bit & 7)), bit >> 3);
      const { entries, study, damagedLines } = readJournal(flipped.toString('utf8'));
      expect({ entries, study }).toEqual({ entries: [entry(1), entry(2)], study: null });
      // A bit can make a line end of another character: then two lines are not as they were written.
      expect([[2], [2, 3]]).toContainEqual(damagedLines);
    }
  });

  it.each(['null', '7', '{}', JSON.stringify(entry(1)), `${journalLine(entry(1)).trimEnd()} `, '\u0000\u0000'])(
    'passes over what is not an entry and tells its line: %j',
    (line) => {
      expect(readJournal(`${line}\n${journalLine(entry(2))}`)).toEqual({
        entries: [entry(2)],
        study: null,
        damagedLines: [1],
      });
    },
  );
});
