import { readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { FileOutcomes } from '../../src/execution/file-outcomes.js';
import { RunFolder } from '../../src/execution/run-folder.js';
import { fakeRun, Scratch } from './fake-run.js';
import { FAKE_STUDY } from './fake-study.js';
import { compileWithFakeEngine } from './program-with-fake-engine.js';

const scratch = new Scratch();
let path: string;

beforeAll(async () => {
  const program = compileWithFakeEngine();
  path = scratch.next();
  await fakeRun(path, FAKE_STUDY, { workerFile: program.workerFile, threads: 2 });
  program.remove();
});
afterAll(() => scratch.remove());

async function withOutcomes<T>(
  instances: number,
  use: (outcomes: FileOutcomes) => Promise<T>,
  batchValues = 1 << 20,
): Promise<T> {
  const folder = await RunFolder.open(path, []);
  const outcomes = new FileOutcomes(folder, FAKE_STUDY, instances, { batchValues });
  try {
    return await use(outcomes);
  } finally {
    await outcomes.close();
    await folder.close();
  }
}

/** A column by splitting the block files at commas, independently of the reader. */
function columnInFiles(candidate: string, name: string): (number | null)[] {
  const folder = join(path, 'outcomes', candidate);
  return [1, 2, 3, 4].flatMap((block) => {
    const [head = '', ...lines] = readFileSync(join(folder, `block-000${block}.csv`), 'utf8')
      .trimEnd()
      .split('\r\n');
    const index = head.split(',').indexOf(name);
    return lines.map((line) => {
      const field = line.split(',')[index] ?? '';
      return field === '' ? null : Number(field);
    });
  });
}

describe('the outcomes in a run folder', () => {
  it.each([
    ['at once', undefined],
    ['block by block', 1],
  ])('give every column as it stands in the block files, read %s', async (_, batchValues) => {
    const check = async (outcomes: FileOutcomes) => {
      for (const candidate of ['strings', 'cross-linked']) {
        for (const { name } of outcomes.columns(candidate)) {
          const column = await outcomes.column(candidate, name);
          const values = Array.from({ length: column.instances }, (_value, index) => column.at(index + 1));
          expect(values).toEqual(columnInFiles(candidate, name));
        }
      }
    };
    await withOutcomes(14, check, batchValues);
  });

  it('give the first instances only, if asked for fewer', async () => {
    const column = await withOutcomes(6, (outcomes) => outcomes.column('strings', 'usable_capacity'));
    expect(column.instances).toBe(6);
    const values = Array.from({ length: 6 }, (_, index) => column.at(index + 1));
    expect(values).toEqual(columnInFiles('strings', 'usable_capacity').slice(0, 6));
  });

  it('give the twin as instance 0', async () => {
    const twin = await withOutcomes(14, (outcomes) => outcomes.twin('strings'));
    const [, line = ''] = readFileSync(join(path, 'outcomes', 'strings', 'twin.csv'), 'utf8').split('\r\n');
    expect([twin.instance, ...twin.values].map((value) => value ?? '').join(',')).toBe(line);
    expect(twin.instance).toBe(0);
  });

  it('leave no temporary file', async () => {
    await withOutcomes(14, (outcomes) => outcomes.column('strings', 'drift'));
    expect(readdirSync(join(path, 'outcomes', 'strings')).filter((name) => name.endsWith('.tmp'))).toEqual([]);
  });

  it('refuse a block that does not read back, by its name', async () => {
    const file = join(path, 'outcomes', 'cross-linked', 'block-0003.csv');
    const text = readFileSync(file, 'utf8');
    writeFileSync(file, text.replace('\r\n10,', '\r\n11,'));
    try {
      await withOutcomes(14, async (outcomes) => {
        await expect(outcomes.column('cross-linked', 'drift')).rejects.toThrow(
          'outcomes/cross-linked/block-0003.csv: instance "11" where 10 is due',
        );
      });
    } finally {
      writeFileSync(file, text);
    }
  });
});
