import { cpSync, mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { runCommand } from '../../src/commands/run.js';
import { type VerifyOptions, verifyCommand } from '../../src/commands/verify.js';
import { sha256 } from '../../src/execution/checksum.js';
import { journalLine, readJournal } from '../../src/execution/journal.js';
import { Scratch } from '../execution/fake-run.js';
import { compileWithFakeEngine, type FakeProgram } from '../execution/program-with-fake-engine.js';
import { diskShell } from './disk-shell.js';
import { SLOW_STUDY } from './fake-cli.js';

let program: FakeProgram;
let whole: string;
const scratch = new Scratch();

beforeAll(async () => {
  program = compileWithFakeEngine();
  const folder = scratch.next();
  mkdirSync(folder, { recursive: true });
  const study = join(folder, 'cabin.yaml');
  writeFileSync(study, SLOW_STUDY.replace('title: slow 50', 'title: fake'));
  whole = join(folder, 'results');
  const shell = diskShell();
  expect(await runCommand({ study, out: whole, threads: 2, instances: 38 }, shell, program.workerFile)).toBe(0);
});
afterAll(() => {
  program.remove();
  scratch.remove();
});

async function verify(folder: string, more: Partial<VerifyOptions> = {}) {
  const shell = diskShell();
  const status = await verifyCommand({ folder, threads: 2, ...more }, shell, program.workerFile);
  return { status, ...shell.printed };
}

/** A copy of the folder, to be spoilt. */
function copy(): string {
  const folder = scratch.next();
  cpSync(whole, folder, { recursive: true });
  return folder;
}

function flipBit(file: string, bit: number): void {
  const bytes = readFileSync(file);
  bytes.writeUInt8(bytes.readUInt8(bit >> 3) ^ (1 << (bit & 7)), bit >> 3);
  writeFileSync(file, bytes);
}

describe('verify', () => {
  it('says that a folder is as it was written, and that blocks computed again are identical', async () => {
    const before = readdirSync(whole, { recursive: true, encoding: 'utf8' }).sort();
    expect(await verify(whole)).toEqual({
      status: 0,
      out: `${whole} is as it was written: 22 blocks and the results; 8 computed again and identical\n`,
      err: '',
    });
    expect((await verify(whole, { blocks: 99 })).out).toContain('22 computed again and identical');
    expect((await verify(whole, { blocks: 0 })).out).toContain('22 blocks and the results; none computed again\n');
    expect(readdirSync(whole, { recursive: true, encoding: 'utf8' }).sort()).toEqual(before);
  });

  it('finds a flipped bit in a stored block', async () => {
    const folder = copy();
    const name = 'outcomes/turned/block-0007.csv';
    flipBit(join(folder, name), 12_345);
    const { status, out } = await verify(folder, { blocks: 99 });
    expect(status).toBe(7);
    expect(out).toBe(
      `${name} is not as it was written\n${folder} is not as it was: 1 finding; 21 blocks intact, 21 computed again\n`,
    );
  });

  it('finds a flipped bit in any line of the journal', async () => {
    const { length } = readFileSync(join(whole, 'journal.jsonl'));
    for (const share of [0.02, 0.3, 0.55, 0.99]) {
      const folder = copy();
      flipBit(join(folder, 'journal.jsonl'), Math.floor(share * length) * 8 + 1);
      const { status, out } = await verify(folder, { blocks: 0 });
      expect(status).toBe(7);
      expect(out).toMatch(/^journal\.jsonl, line \d+ is not as it was written\n/);
    }
  });

  it('finds a flipped bit in the resolved study, and computes nothing from it', async () => {
    const folder = copy();
    flipBit(join(folder, 'study.resolved.json'), 4001);
    const { status, out } = await verify(folder);
    expect(status).toBe(7);
    expect(out).toMatch(/^study\.resolved\.json is not as it was written\n.*; 0 blocks intact, none computed again\n$/);
  });

  it('finds a value that is whole but not what is computed', async () => {
    const folder = copy();
    const file = join(folder, 'outcomes', 'strings', 'block-0002.csv');
    const { entries } = readJournal(readFileSync(join(folder, 'journal.jsonl'), 'utf8'));
    const entry = entries.find(({ candidate, block }) => candidate === 'strings' && block === 2);
    if (entry === undefined) throw new Error('the block is in the journal');
    const text = readFileSync(file, 'utf8').replace(/(?<=\r\n8,)\d/, (digit) => String((Number(digit) + 1) % 10));
    writeFileSync(file, text);
    const line = journalLine({ ...entry, sha256: sha256(text) });
    writeFileSync(join(folder, 'journal.jsonl'), line, { flag: 'a' });
    const { status, out } = await verify(folder, { blocks: 22 });
    expect(status).toBe(7);
    expect(out).toMatch(/^outcomes\/strings\/block-0002\.csv, instance 8: \w+ is \S+, and \S+ when computed again\n/);
  });

  it.each(['summary.csv', 'comparisons.csv', 'by-cycle.csv', 'study.yaml'])(
    'finds %s altered or gone',
    async (name) => {
      const folder = copy();
      flipBit(join(folder, name), 805);
      const altered = await verify(folder, { blocks: 0 });
      expect(altered).toMatchObject({
        status: 7,
        out: `${name} is not as datapackage.json says\n${folder} is not as it was: 1 finding; 22 blocks intact, none computed again\n`,
      });
      rmSync(join(folder, name));
      const gone = await verify(folder, { blocks: 0 });
      expect([gone.status, gone.out.split('\n')[0]]).toEqual([7, `${name} cannot be read`]);
    },
  );

  it('finds the description of the results altered or gone', async () => {
    const folder = copy();
    flipBit(join(folder, 'datapackage.json'), 805);
    const altered = await verify(folder, { blocks: 0 });
    expect([altered.status, altered.out.split('\n')[0]]).toEqual([7, 'datapackage.json is not as it was written']);
    rmSync(join(folder, 'datapackage.json'));
    const gone = await verify(folder, { blocks: 0 });
    expect(gone.status).toBe(7);
    expect(gone.out).toMatch(/^datapackage\.json cannot be read, so that the results cannot be compared\n/);
  });

  it('misses no results of a run that was killed before it wrote any', async () => {
    const folder = copy();
    const record = JSON.parse(readFileSync(join(folder, 'run.json'), 'utf8'));
    const [session] = record.sessions;
    const killed = { ...session, ended: null, duration_s: null, results: null };
    writeFileSync(join(folder, 'run.json'), JSON.stringify({ ...record, sessions: [session, killed] }));
    for (const name of ['summary.csv', 'datapackage.json']) rmSync(join(folder, name));
    expect(await verify(folder, { blocks: 0 })).toMatchObject({
      status: 0,
      out: `${folder} is as it was written: 22 blocks, no results yet; none computed again\n`,
    });
  });

  it('tells as one JSON document what it found', async () => {
    const { out } = await verify(whole, { json: true, blocks: 3 });
    expect(JSON.parse(out)).toEqual({
      folder: whole,
      blocks: { intact: 22, missing: 0, recomputed: 3 },
      results_compared: true,
      findings: [],
    });
  });

  it('refuses what is no folder of a run, and one of another engine', async () => {
    expect(await verify(scratch.next())).toMatchObject({ status: 2, out: '' });
    const folder = copy();
    const journal = join(folder, 'journal.jsonl');
    const { entries, study } = readJournal(readFileSync(journal, 'utf8'));
    const other = entries.map((entry) => journalLine({ ...entry, key: 'of another engine' }));
    writeFileSync(journal, `${journalLine({ study: study ?? '' })}${other.join('')}`);
    const { status, err } = await verify(folder);
    expect(status).toBe(2);
    expect(err).toMatch(/was not computed by engine \d+/);
  });
});
