import { createHash } from 'node:crypto';
import { beforeAll, describe, expect, it } from 'vitest';
import { encodeBlock } from '../../src/outcomes/block-csv.js';
import { MemoryOutcomes } from '../../src/outcomes/memory-outcomes.js';
import { CONVENTIONS, METHOD_WORDS } from '../../src/output/method-words.js';
import { RESULT_FILES, writeResults } from '../../src/output/write-results.js';
import { answerStudy } from '../../src/questions/answer-study.js';
import { madeUpCandidate, madeUpOutcomes, madeUpStudy } from '../questions/made-up-study.js';
import { parsedCsv } from './parsed-csv.js';

const HOSTILE = '=cmd|"/c calc"!A1';
const study = madeUpStudy({
  title: HOSTILE,
  instances: 3,
  blockSize: 2,
  candidates: [madeUpCandidate('strings'), madeUpCandidate('packs', { wiring: 'native', title: HOSTILE })],
});
const [strings, packs] = study.candidates;
const outcomes = new Map([
  [
    'strings',
    madeUpOutcomes(study, strings, { load_lost: [0, 1, 0, 1], lost_capacity: [0.1, 2 / 3, 6, 7], drift: [0, 1, 2, 3] }),
  ],
  ['packs', madeUpOutcomes(study, packs, { load_lost: [0, 0, 0, 1], lost_capacity: [0.1, 5, 1e-7, 8] })],
]);

/** A folder in memory that holds what a run leaves before its results. */
function startedFolder() {
  const files = new Map([
    ['study.yaml', 'motleybank: 1\ntitle: H\u00fctte\n'],
    ['study.resolved.json', '{}\n'],
    ['inputs/01-week.csv', 'time_h,load_W\n0,100\n'],
  ]);
  for (const [key, { columns, rows, twin }] of outcomes) {
    files.set(`outcomes/${key}/twin.csv`, encodeBlock(columns, { first: 0, last: 0 }, [twin]));
    files.set(`outcomes/${key}/block-0001.csv`, encodeBlock(columns, { first: 1, last: 2 }, rows.slice(0, 2)));
    files.set(`outcomes/${key}/block-0002.csv`, encodeBlock(columns, { first: 3, last: 3 }, rows.slice(2)));
  }
  return {
    files,
    read: async (name: string) => files.get(name),
    write: async (name: string, text: string) => {
      files.set(name, text);
    },
  };
}

const kept = {
  inputs: ['inputs/01-week.csv'],
  outcomes: [...outcomes.keys()].map((candidate) => ({
    candidate,
    twin: `outcomes/${candidate}/twin.csv`,
    blocks: [`outcomes/${candidate}/block-0001.csv`, `outcomes/${candidate}/block-0002.csv`],
  })),
};
const provenance = { engine: 3, nodeMajor: 20, architecture: 'x64' };

async function finishedFolder() {
  const folder = startedFolder();
  const answers = await answerStudy(study, new MemoryOutcomes(outcomes));
  await writeResults(folder, study, answers, provenance, kept);
  return { ...folder, answers };
}

interface Resource {
  readonly name: string;
  readonly path: string | readonly string[];
  readonly type?: string;
  readonly bytes: number;
  readonly hash: string;
  readonly parts?: readonly { readonly path: string; readonly bytes: number; readonly hash: string }[];
  readonly schema?: { readonly fields: readonly Readonly<Record<string, unknown>>[] };
}

let folder: Awaited<ReturnType<typeof finishedFolder>>;
let described: { readonly resources: readonly Resource[] } & Readonly<Record<string, unknown>>;

function textOf(name: string): string {
  const text = folder.files.get(name);
  if (text === undefined) throw new Error(`no ${name}`);
  return text;
}

beforeAll(async () => {
  folder = await finishedFolder();
  described = JSON.parse(textOf(RESULT_FILES.dataPackage));
});

describe('results in the folder of a run', () => {
  it('hold every answer, read back by a CSV parser', async () => {
    const [head, ...rows] = await parsedCsv(textOf('summary.csv'));
    expect(head.join()).toBe(
      'candidate,measure,from_cycle,to_cycle,statistic,unit,estimate,lower,upper,confidence_percent,instances,method,note',
    );
    expect(rows).toHaveLength(folder.answers.summary.length);
    const mean = rows.find((row) => row[0] === 'strings' && row[1] === 'lost_capacity' && row[4] === 'mean');
    // By hand: (2/3 + 6 + 7) / 3 = 4.5555...
    expect(mean?.slice(2, 7)).toEqual(['180', '180', 'mean', '%', '4.555556']);
    const drift = rows.find((row) => row[0] === 'packs' && row[1] === 'drift' && row[4] === 'percentile_95');
    expect(drift?.join()).toBe(
      'packs,drift,174,180,percentile_95,%,,,,95,3,,not applicable: one BMS over the full series length',
    );
    const twin = rows.find((row) => row[0] === 'packs' && row[1] === 'load_lost' && row[4] === 'twin');
    expect(twin?.join()).toBe('packs,load_lost,1,180,twin,%,0,,,,1,,the bank with every value at its mean');
  });

  it('end every line as RFC 4180 wants it and hold numbers without exponents', () => {
    for (const name of ['summary.csv', 'by-cycle.csv', 'comparisons.csv']) {
      const text = textOf(name);
      expect(text.endsWith('\r\n')).toBe(true);
      expect(text.replaceAll('\r\n', '')).not.toMatch(/[\r\n]/);
      expect(text).not.toMatch(/,-?\d+(\.\d+)?e[+-]?\d+,/);
    }
  });

  it('are the same when written again', async () => {
    const again = await finishedFolder();
    expect([...again.files]).toEqual([...folder.files]);
  });

  it('never let a title begin a field', () => {
    for (const name of ['summary.csv', 'by-cycle.csv', 'comparisons.csv']) expect(textOf(name)).not.toContain('cmd|');
  });

  it('call nothing safe', () => {
    for (const [name, text] of folder.files) expect(text, name).not.toMatch(/safe/i);
  });

  it('need what a run leaves before them', async () => {
    const incomplete = startedFolder();
    incomplete.files.delete('outcomes/packs/block-0002.csv');
    await expect(writeResults(incomplete, study, folder.answers, provenance, kept)).rejects.toThrow(
      'outcomes/packs/block-0002.csv is not in the folder of the run',
    );
    expect(incomplete.files.has(RESULT_FILES.dataPackage)).toBe(false);
  });
});

describe('data package', () => {
  it('says what fixes the results', () => {
    expect(described.$schema).toBe('https://datapackage.org/profiles/2.0/datapackage.json');
    expect(described.title).toBe(HOSTILE);
    expect(described.motleybank).toEqual({
      engine: 3,
      study_format: 1,
      seed: '7',
      plan: 'independent',
      block: 2,
      instances: 3,
      node_major: 20,
      architecture: 'x64',
      confidence_percent: 95,
      verdict_confidence_percent: 95,
      enough: null,
      methods: METHOD_WORDS,
      conventions: CONVENTIONS,
    });
  });

  it('describes every file but itself, each once', () => {
    const paths = described.resources.flatMap(({ path }) => path);
    expect([...paths].sort()).toEqual([...folder.files.keys()].filter((name) => name !== 'datapackage.json').sort());
    const names = described.resources.map(({ name }) => name);
    expect(new Set(names).size).toBe(names.length);
    // Data Package standard, version 2, recommended form of a name.
    for (const name of names) expect(name).toMatch(/^[a-z0-9._-]+$/);
  });

  it('has the size and the checksum of every file', () => {
    for (const { path, bytes, hash, parts } of described.resources) {
      const paths = [path].flat();
      const contents = paths.map((name) => Buffer.from(textOf(name)));
      const sha256 = (data: Buffer) => `sha256:${createHash('sha256').update(data).digest('hex')}`;
      expect(bytes).toBe(Buffer.concat(contents).length);
      expect(hash).toBe(sha256(Buffer.concat(contents)));
      if (parts === undefined) expect(paths).toHaveLength(1);
      else {
        expect(parts).toEqual(
          paths.map((name, at) => ({ path: name, bytes: contents[at].length, hash: sha256(contents[at]) })),
        );
      }
    }
  });

  it('describes every column of every table in order, with type, words and unit', async () => {
    const tables = described.resources.filter(({ type }) => type === 'table');
    expect(tables.map(({ name }) => name)).toEqual([
      'summary',
      'by-cycle',
      'comparisons',
      'outcomes-strings',
      'outcomes-strings-twin',
      'outcomes-packs',
      'outcomes-packs-twin',
    ]);
    for (const { path, schema } of tables) {
      const fields = schema?.fields ?? [];
      for (const name of [path].flat()) {
        const [head, ...rows] = await parsedCsv(textOf(name));
        expect(fields.map((field) => field.name)).toEqual(head);
        for (const [at, field] of fields.entries()) {
          expect(['string', 'integer', 'number']).toContain(field.type);
          expect(field.title).toBeTruthy();
          expect(field.description).toMatch(/\.$/);
          expect(field.type === 'string' || 'unit' in field || field.unitColumn === 'unit', `${field.name}`).toBe(true);
          const pattern = field.type === 'integer' ? /^(-?\d+)?$/ : field.type === 'number' ? /^(-?[\d.e+-]+)?$/ : /^/;
          const constraints = Object(field.constraints);
          for (const row of rows) {
            expect(row[at]).toMatch(pattern);
            if (constraints.required) expect(row[at], `${name} ${field.name}`).not.toBe('');
            if (constraints.enum && row[at] !== '') expect(constraints.enum).toContain(Number(row[at]));
          }
        }
      }
    }
  });
});
