import { readdirSync, readFileSync, rmSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { judgeRequirement } from '../../src/commands/requirement.js';
import { type RunOptions, runCommand } from '../../src/commands/run.js';
import { statusCommand } from '../../src/commands/status.js';
import { verifyCommand } from '../../src/commands/verify.js';
import { Scratch } from '../execution/fake-run.js';
import { compileWithFakeEngine, type FakeProgram } from '../execution/program-with-fake-engine.js';
import { diskShell } from './disk-shell.js';
import { memoryShell } from './memory-shell.js';

/** Every event happens in about half of the banks of the fake engine. */
function studyText(halfWidth: number, more = ''): string {
  return `motleybank: 1
title: fake
seed: 7
instances: 256
block: 2
cycles: 2
stock:
  house: {modules: [A1, A2, A3, A4], rated_Ah: 100}
duty: {phases: [{discharge_W: 500, for_h: 4}, {charge: to-full, at_most_h: 10}]}
candidates:
  strings: {wiring: strings, modules: [[A1, A2], [A3, A4]]}
  cross-linked: {wiring: cross-linked, modules: [[A1, A2], [A3, A4]]}
acceptance:
  - {measure: string_lost, at_most_percent: 99}
enough:
  watch: [{measure: load_lost, half_width_points: ${halfWidth}}]
${more}`;
}

let program: FakeProgram;
const scratch = new Scratch();

beforeAll(() => {
  program = compileWithFakeEngine();
});
afterAll(() => {
  program.remove();
  scratch.remove();
});

async function run(text: string, options: Partial<RunOptions> = {}, signal = new AbortController().signal) {
  const shell = { ...memoryShell({ 'cabin.yaml': text }), interruption: () => signal };
  const out = options.out ?? scratch.next();
  const status = await runCommand({ study: 'cabin.yaml', threads: 2, ...options, out }, shell, program.workerFile);
  return { status, folder: out, ...shell.printed };
}

/** All files of a run folder that must be the same for every run of a study. */
function resultFiles(folder: string): Record<string, string> {
  const names = readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter(
    (name) => statSync(join(folder, name)).isFile() && name !== 'journal.jsonl' && name !== 'run.json',
  );
  return Object.fromEntries(names.sort().map((name) => [name, readFileSync(join(folder, name), 'utf8')]));
}

function described(folder: string) {
  return JSON.parse(readFileSync(join(folder, 'datapackage.json'), 'utf8')).motleybank;
}

describe('a run with looks', () => {
  // By hand, Wilson at one half: reach 1.959964 sqrt(n / 4 + 0.960365) / (n + 3.841459): 16.4 points of 32, 11.9 of 64, 8.5
  // of 128, 6.1 of 256; shares off one half are narrower by a little.
  it.each([
    [17.5, 32, 'narrow', /taken: 32; ended there/],
    [13, 64, 'narrow', /taken: 32, 64; ended there/],
    [9, 128, 'narrow', /taken: 32, 64, 128; ended there/],
    [6.5, 256, 'narrow', /taken: 32, 64, 128, 256; ended there/],
    [1, 256, 'maximum', /taken: 32, 64, 128, 256; ended at the largest number/],
  ])('with a half-width of %s points ends at %s banks', async (halfWidth, banks, end, words) => {
    const { status, out, err, folder } = await run(studyText(halfWidth));
    expect(status).toBe(0);
    expect(out.replaceAll(/\s+/g, ' ')).toMatch(words);
    expect(out).toContain(`${banks} sampled banks,`);
    expect(err).toContain(`${banks} banks x 2 candidates in`);
    const { instances, enough } = described(folder);
    expect(instances).toBe(banks);
    expect(enough).toMatchObject({ schedule: [32, 64, 128, 256], end });
    expect(enough.looks.map((look: { enough: boolean }) => look.enough)).toEqual(
      [32, 64, 128, 256].filter((look) => look <= banks).map((look) => end === 'narrow' && look === banks),
    );
    // Nothing was computed beyond the end.
    expect(readdirSync(join(folder, 'outcomes', 'strings'))).toHaveLength(banks / 2 + 1);
  });

  it('leaves the same bytes on any number of threads, interrupted or not, and with blocks beyond its end', async () => {
    const text = studyText(13);
    const one = await run(text, { threads: 1 });
    const three = await run(text, { threads: 3 });
    expect(resultFiles(three.folder)).toEqual(resultFiles(one.folder));
    expect(three.out.replaceAll(three.folder, '')).toBe(one.out.replaceAll(one.folder, ''));
    const interrupted = await run(text, {}, AbortSignal.abort('SIGINT'));
    expect(interrupted.status).toBe(130);
    const { folder } = interrupted;
    await run(text, { out: folder });
    expect(resultFiles(folder)).toEqual(resultFiles(one.folder));
    const longer = await run(studyText(9), { out: folder });
    expect(longer.out).toContain('128 sampled banks');
    const again = await run(text, { out: folder });
    expect(again.err).toContain('nothing was left to compute');
    for (const [name, content] of Object.entries(resultFiles(one.folder))) {
      expect(readFileSync(join(folder, name), 'utf8'), name).toBe(content);
    }
  });

  it('is complete at the look where it ended, with and without blocks beyond', async () => {
    const { folder } = await run(studyText(13));
    const standing = async () => {
      const shell = diskShell();
      const status = await statusCommand({ folder }, shell, Date.now());
      const verified = await verifyCommand({ folder, blocks: 0 }, shell, program.workerFile);
      return { status, verified, out: shell.printed.out };
    };
    const early = await standing();
    expect([early.status, early.verified]).toEqual([0, 0]);
    expect(early.out).toContain(': complete, session of ');
    expect(early.out).toMatch(
      /^66 of 66 blocks.*; 64 of 64 banks in every candidate \(enough at that look, of at most 256\)$/m,
    );
    expect(early.out).toContain(': 66 blocks and the results; none computed again\n');
    await run(studyText(9), { out: folder });
    await run(studyText(13), { out: folder });
    const beyond = await standing();
    expect([beyond.status, beyond.verified]).toEqual([0, 0]);
    expect(beyond.out).toContain('66 of 66 blocks');
    expect(beyond.out).toContain(': 130 blocks and the results');
    rmSync(join(folder, 'outcomes', 'strings', 'block-0003.csv'));
    const damaged = await standing();
    expect([damaged.status, damaged.verified]).toEqual([5, 7]);
  });

  it('has the figures of a run with that fixed count, but for its verdicts', async () => {
    const looked = await run(studyText(13));
    const fixed = await run(
      studyText(13)
        .replace(/enough:\n.*\n/, '')
        .replace('256', '64'),
    );
    for (const name of ['summary.csv', 'comparisons.csv', 'by-cycle.csv']) {
      expect(resultFiles(looked.folder)[name]).toBe(resultFiles(fixed.folder)[name]);
    }
    // By hand: four looks share 5 %.
    expect(looked.out.replaceAll(/\s+/g, ' ')).toContain(
      '98.75 % interval is on one side (99.375 % one-sided; 4 looks',
    );
    expect(fixed.out.replaceAll(/\s+/g, ' ')).toContain('95 % interval is on one side (97.5 % one-sided)');
  });

  it('looks where it is told to, and not beyond a smaller number of the command line', async () => {
    const text = studyText(13, '  looks: [40, 100]\n');
    expect(described((await run(text)).folder).enough).toMatchObject({ schedule: [40, 100, 256], end: 'narrow' });
    const few = await run(text, { instances: 50 });
    expect(described(few.folder).enough).toMatchObject({ schedule: [40, 50], end: 'maximum' });
  });

  it('whose simulation fails beyond the look at which it ends does not get there', async () => {
    const fails = (bank: number) => studyText(13).replace('title: fake', `title: exit strings ${bank}`);
    expect((await run(fails(65))).status).toBe(0);
    const early = await run(fails(33));
    expect(early.status).toBe(5);
    expect(early.err).toContain('with 32 of at most 256 banks in every candidate');
    expect(early.out.replaceAll(/\s+/g, ' ')).toContain('taken: 32; interrupted before an end');
  });
});

describe('run --require', () => {
  const judged = (limit: number) => studyText(17.5).replace('at_most_percent: 99', `at_most_percent: ${limit}`);

  it.each([
    [99, 0, 'required strings: meets\n'],
    [10, 3, 'required strings: fails\n  fails: string lost, at most 10 % of banks\n'],
    [50, 4, 'required strings: not decided\n  not decided: string lost, at most 50 % of banks\n'],
  ])('against a limit of %s %% ends with status %s', async (limit, status, message) => {
    const found = await run(judged(limit), { require: 'strings' });
    expect(found.status).toBe(status);
    expect(found.err).toContain(message);
    // Nothing else is another: without it the same run is done.
    expect(await run(judged(limit), { out: found.folder })).toMatchObject({ status: 0, out: found.out });
    expect((await run(judged(limit), { out: found.folder, require: 'strings', quiet: true })).err).toBe('');
  });

  it('decides nothing on a candidate to which no line applies', () => {
    const verdicts = [{ candidate: 'native', verdict: 'not applicable', lines: [] }] as const;
    expect(judgeRequirement({ verdicts }, 'native')).toEqual({
      status: 4,
      message: 'required native: not applicable',
    });
  });

  it('refuses a name that is no candidate, and a study without lines, before anything is computed', async () => {
    const typo = await run(judged(10), { require: 'stings' });
    expect(typo).toMatchObject({ status: 2, out: '' });
    expect(typo.err).toBe('--require must be a candidate of the study, got "stings" (did you mean strings?)\n');
    const lineless = await run(judged(10).replace(/acceptance:\n.*\n/, ''), { require: 'strings' });
    expect(lineless).toMatchObject({ status: 2, out: '' });
    expect(lineless.err).toBe('--require needs acceptance lines in the study, which has none\n');
  });

  it('gives way to blocks that are missing', async () => {
    const lost = judged(10).replace('title: fake', 'title: exit strings 20');
    expect((await run(lost, { require: 'strings' })).status).toBe(5);
  });
});
