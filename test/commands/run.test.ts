import { appendFileSync, existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { join, relative } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type RunOptions, runCommand } from '../../src/commands/run.js';
import type { Shell } from '../../src/commands/shell.js';
import { InstanceFault } from '../../src/execution/instance-fault.js';
import { Scratch } from '../execution/fake-run.js';
import { compileWithFakeEngine, type FakeProgram } from '../execution/program-with-fake-engine.js';

const STUDY = `motleybank: 1
title: fake
seed: 7
instances: 40
cycles: 3
stock:
  newer: {grade: new-same-make, modules: [N1, N2, N3, N4], cells_in_series: 4, capacity_Ah: {nominal: 100}}
bank:
  charger: {limit_A: 60, absorption_V: 28.4, until: {tail_A: 4}, float_V: 27.2}
duty:
  profile: duties/week.csv
candidates:
  strings: {wiring: strings, modules: [[N1, N2], [N3, N4]]}
  cross-linked: {wiring: cross-linked, modules: [[N1, N2], [N3, N4]], link_mOhm: 1}
reference: strings
acceptance:
  - {measure: load_lost, at_most_percent: 6}
`;
const BLOCKS = 6; // by hand: 2 candidates x (1 twin + 2 blocks of at most 32 for 40 instances)

let program: FakeProgram;
const scratch = new Scratch();

beforeAll(() => {
  program = compileWithFakeEngine();
});
afterAll(() => {
  program.remove();
  scratch.remove();
});

/** A study file of its own with its profile beside it. */
function studyFile(text = STUDY): string {
  const folder = scratch.next();
  mkdirSync(join(folder, 'duties'), { recursive: true });
  writeFileSync(join(folder, 'duties', 'week.csv'), 'time_h,load_W,charge_W\n0,100,0\n12,0,500\n');
  const file = join(folder, 'cabin.yaml');
  writeFileSync(file, text);
  return file;
}

interface Outcome {
  readonly status: number;
  readonly out: string;
  readonly err: string;
}

/** Runs the command with the real file system and everything else in memory. */
async function run(options: RunOptions, interruption = new AbortController().signal): Promise<Outcome> {
  let out = '';
  let err = '';
  const shell: Shell = {
    out: (text) => {
      out += text;
    },
    err: (text) => {
      err += text;
    },
    readText: (path) => (existsSync(path) ? { text: readFileSync(path, 'utf8') } : { problem: 'no such file' }),
    createText: () => 'not in this test',
    replaceText: () => 'not in this test',
    exists: existsSync,
    isTerminal: { out: false, err: false },
    color: false,
    now: () => performance.now(),
    interruption: () => interruption,
  };
  const status = await runCommand({ threads: 2, ...options }, shell, program.workerFile);
  return { status, out, err };
}

/** All files of a run folder that must be the same for every run of a study. */
function resultFiles(folder: string): Record<string, string> {
  const files = readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter((name) =>
    statSync(join(folder, name)).isFile(),
  );
  return Object.fromEntries(
    files
      .filter((name) => name !== 'journal.jsonl' && name !== 'run.json')
      .sort()
      .map((name) => [name, readFileSync(join(folder, name), 'utf8')]),
  );
}

describe('run', () => {
  it('keeps its input files under names that every system can have, however theirs are spelt', async () => {
    const study = studyFile(
      STUDY.replace('duties/week.csv', `duties/h\u00fctte "${'x'.repeat(200)}": 2.csv`.replace(/^(.*)$/, "'$1'")),
    );
    const long = `h\u00fctte "${'x'.repeat(200)}": 2.csv`;
    writeFileSync(join(study, '..', 'duties', long), 'time_h,load_W,charge_W\n0,100,0\n12,0,500\n');
    const out = scratch.next();
    expect(await run({ study, out })).toMatchObject({ status: 0 });
    expect(readdirSync(join(out, 'inputs'))).toEqual([`01-${'x'.repeat(52)}__ 2.csv`]);
  });

  it('leaves the folder that the README promises and prints the table', async () => {
    const study = studyFile();
    const out = scratch.next();
    const { status, out: table, err } = await run({ study, out });
    expect(status).toBe(0);
    expect(table).toContain('40 sampled banks');
    expect(err).toMatch(/^40 banks x 2 candidates in \d+ s on 2 threads; written to .+\n$/);
    expect(
      readdirSync(out, { recursive: true, encoding: 'utf8' })
        .map((name) => name.replaceAll('\\', '/'))
        .sort(),
    ).toEqual([
      'by-cycle.csv',
      'comparisons.csv',
      'datapackage.json',
      'inputs',
      'inputs/01-week.csv',
      'journal.jsonl',
      'outcomes',
      'outcomes/cross-linked',
      'outcomes/cross-linked/block-0001.csv',
      'outcomes/cross-linked/block-0002.csv',
      'outcomes/cross-linked/twin.csv',
      'outcomes/strings',
      'outcomes/strings/block-0001.csv',
      'outcomes/strings/block-0002.csv',
      'outcomes/strings/twin.csv',
      'run.json',
      'study.resolved.json',
      'study.yaml',
      'summary.csv',
    ]);
    expect(readFileSync(join(out, 'study.yaml'), 'utf8')).toBe(STUDY);
    expect(readFileSync(join(out, 'journal.jsonl'), 'utf8').trimEnd().split('\n')).toHaveLength(BLOCKS + 1);
    expect(JSON.parse(readFileSync(join(out, 'run.json'), 'utf8'))).toMatchObject({
      interruptions: 0,
      sessions: [{ threads: 2, ended: 'complete' }],
    });
  });

  it('leaves the same bytes and prints the same for any number of threads, in any folder', async () => {
    const study = studyFile();
    const [one, three] = [scratch.next(), scratch.next()];
    const first = await run({ study, out: one, threads: 1, json: true });
    const second = await run({ study, out: three, threads: 3, json: true });
    expect(resultFiles(three)).toEqual(resultFiles(one));
    expect(second.out).toBe(first.out);
  });

  it('puts the command line over the study, also in what it keeps', async () => {
    const study = studyFile();
    const out = scratch.next();
    const { out: json } = await run({ study, out, seed: '8', instances: 33, json: true });
    expect(JSON.parse(json)).toMatchObject({ seed: '8', instances: 33 });
    expect(JSON.parse(readFileSync(join(out, 'study.resolved.json'), 'utf8'))).toMatchObject({
      seed: '8',
      instances: 33,
    });
  });

  it('on a complete folder computes nothing and prints the table again', async () => {
    const study = studyFile();
    const out = scratch.next();
    const first = await run({ study, out });
    const before = resultFiles(out);
    const again = await run({ study, out });
    expect(again).toEqual({
      status: 0,
      out: first.out,
      err: `${out} is complete: 40 banks x 2 candidates; nothing was left to compute\n`,
    });
    expect(resultFiles(out)).toEqual(before);
  });

  it('judges a moved acceptance line from the outcomes that are there', async () => {
    const out = scratch.next();
    const first = await run({ study: studyFile(), out });
    const moved = await run({ study: studyFile(STUDY.replace('at_most_percent: 6', 'at_most_percent: 99')), out });
    expect(moved.err).toContain('nothing was left to compute');
    expect(first.out).toContain('at most 6 %');
    expect(moved.out).toContain('at most 99 %');
  });

  it('refuses a folder with another study and says where they differ first', async () => {
    const study = studyFile();
    const out = scratch.next();
    await run({ study, out });
    const before = resultFiles(out);
    const other = await run({ study, out, seed: '8' });
    expect(other.status).toBe(2);
    expect(other.out).toBe('');
    expect(other.err).toContain('holds another run: seed is "7" there and "8" here; --replace discards it');
    const charger = await run({ study: studyFile(STUDY.replace('28.4', '28.2')), out });
    expect(charger.err).toContain('candidate.charger.absorptionV is 28.4 there and 28.2 here');
    const stock = await run({ study: studyFile(STUDY.replace('nominal: 100', 'nominal: 105')), out });
    expect(stock.err).toMatch(/another run: stocks\.newer\.\w+.* is .+ there and .+ here/);
    expect(resultFiles(out)).toEqual(before);
  });

  it('replaces another study if told so, and the folder is as if it had been empty', async () => {
    const study = studyFile();
    const [replaced, fresh] = [scratch.next(), scratch.next()];
    await run({
      study: studyFile(STUDY.replace('strings: {', 'old: {').replace('reference: strings', 'reference: old')),
      out: replaced,
    });
    writeFileSync(join(replaced, 'notes.txt'), 'mine');
    expect((await run({ study, out: replaced, seed: '8', replace: true })).status).toBe(0);
    await run({ study, out: fresh, seed: '8' });
    const { 'notes.txt': notes, ...files } = resultFiles(replaced);
    expect(notes).toBe('mine');
    expect(files).toEqual(resultFiles(fresh));
  });

  it('touches no folder that is not that of a run', async () => {
    const study = studyFile();
    const out = join(study, '..');
    const { status, err } = await run({ study, out, replace: true });
    expect(status).toBe(2);
    expect(err).toContain('is not the folder of a run');
    expect(readdirSync(out).sort()).toEqual(['cabin.yaml', 'duties']);
  });

  it('mends a damaged block, says so, and ends with the same results', async () => {
    const study = studyFile();
    const out = scratch.next();
    await run({ study, out });
    const before = resultFiles(out);
    appendFileSync(join(out, 'outcomes', 'strings', 'block-0002.csv'), '41,\r\n');
    const { status, err } = await run({ study, out });
    expect(status).toBe(0);
    expect(err).toContain('outcomes/strings/block-0002.csv is not as it was written; computing it again\n');
    expect(err).toContain('40 banks x 2 candidates, 1 of 6 blocks computed in');
    expect(resultFiles(out)).toEqual(before);
  });

  it.each([
    ['SIGINT', 130],
    ['SIGTERM', 143],
  ])('interrupted by %s ends with its status, and taken up again equals an undisturbed run', async (signal, status) => {
    const study = studyFile();
    const [out, undisturbed] = [scratch.next(), scratch.next()];
    const interrupted = await run({ study, out }, AbortSignal.abort(signal));
    expect(interrupted).toEqual({
      status,
      out: '',
      err: `interrupted before every candidate had a block: nothing to summarise; 6 blocks missing in ${out}; the same command takes them up\n`,
    });
    expect((await run({ study, out })).status).toBe(0);
    await run({ study, out: undisturbed });
    expect(resultFiles(out)).toEqual(resultFiles(undisturbed));
    expect(JSON.parse(readFileSync(join(out, 'run.json'), 'utf8'))).toMatchObject({
      interruptions: 1,
      sessions: [{ ended: 'interrupted' }, { ended: 'complete' }],
    });
  });

  it('whose thread ends each time gives status 5, the address, and results of the banks before it', async () => {
    const study = studyFile(STUDY.replace('title: fake', 'title: exit strings 35'));
    const { status, out, err } = await run({ study, out: scratch.next() });
    expect(status).toBe(5);
    expect(err).toContain('strings, block 2: its thread ended each time');
    expect(err).toContain('ended with 32 of 40 banks in every candidate: the results are of those');
    expect(out).toContain('32 of 40 sampled banks (unfinished)');
  });

  it('whose simulation fails is our fault, with the address of the instance', async () => {
    const study = studyFile(STUDY.replace('title: fake', 'title: throw strings 35'));
    const out = scratch.next();
    const error = await run({ study, out }).catch((reason: unknown) => reason);
    expect(error).toBeInstanceOf(InstanceFault);
    expect(String(error)).toContain('strings, instance 35: no convergence');
    expect(JSON.parse(readFileSync(join(out, 'run.json'), 'utf8'))).toMatchObject({ sessions: [{ ended: 'failed' }] });
    // The folder is free again and keeps what was finished.
    expect((await run({ study: studyFile(), out })).status).toBe(0);
  });

  it('lists the banks that did not converge within the allowed share, and summarises the others', async () => {
    const study = studyFile(STUDY.replace('title: fake', 'title: diverge strings 3+35'));
    const out = scratch.next();
    const { status, out: json, err } = await run({ study, out, mayFailPercent: 5, json: true, quiet: true });
    expect(status).toBe(0);
    expect(err).toBe(
      `strings: 2 of 40 banks did not converge and are left out (failed.csv); the first: motleybank trace ${out} --candidate strings --instance 3\n`,
    );
    expect(readFileSync(join(out, 'failed.csv'), 'utf8')).toBe(
      [
        'candidate,instance,message,trace',
        'strings,3,bank 3 did not settle,motleybank trace . --candidate strings --instance 3',
        'strings,35,bank 35 did not settle,motleybank trace . --candidate strings --instance 35',
        '',
      ].join('\r\n'),
    );
    expect(JSON.parse(json).instances).toBe(40);
    // Nothing is summarised of them: 38 banks are left, of which some have no such measure.
    const [head = '', ...rows] = readFileSync(join(out, 'summary.csv'), 'utf8').trimEnd().split('\r\n');
    const n = head.split(',').indexOf('instances');
    const loadLost = rows
      .filter((row) => /,load_lost,.*share_of_banks/.test(row))
      .map((row) => Number(row.split(',')[n]));
    expect(loadLost).toEqual([38, 40]);
  });

  it('of a study with faults computes nothing and makes no folder', async () => {
    const out = scratch.next();
    const { status, err } = await run({ study: studyFile(STUDY.replace('seed: 7', 'sed: 7')), out });
    expect(status).toBe(2);
    expect(err).toContain('sed');
    expect(existsSync(out)).toBe(false);
  });

  it('keeps quiet but for results and faults', async () => {
    const study = studyFile();
    const { status, out, err } = await run({ study, out: scratch.next(), quiet: true });
    expect([status, err]).toEqual([0, '']);
    expect(out).not.toBe('');
  });

  it('writes below results/ of the working directory if no folder is named', async () => {
    const study = studyFile();
    const home = scratch.next();
    mkdirSync(home, { recursive: true });
    const before = process.cwd();
    process.chdir(home);
    try {
      await run({ study: relative(process.cwd(), study) });
    } finally {
      process.chdir(before);
    }
    expect(existsSync(join(home, 'results', 'cabin', 'summary.csv'))).toBe(true);
  });
});
