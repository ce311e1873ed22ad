import { describe, expect, it } from 'vitest';
import { checkCommand } from '../../src/commands/check.js';
import { simulationAids } from '../../src/commands/simulation-aids.js';
import type { CheckAids } from '../../src/commands/trial.js';
import { repositoryText, studyOf, studyWith } from '../study/study-under-test.js';
import { type MemoryShell, memoryShell } from './memory-shell.js';

const FILES = {
  'studies/demo.yaml': repositoryText('studies/demo.yaml'),
  'studies/demo-week.csv': repositoryText('studies/demo-week.csv'),
};
/** 30 000 bank-cycles per second; no twin loses load. */
const AIDS: CheckAids = {
  trial: () => ({ bankCyclesPerSecond: 30_000 }),
  twins: ({ candidates }) => candidates.map(() => ({ losesLoad: false, elapsedS: 180 * 86_400 })),
  prospectiveCurrents: ({ candidates }) =>
    candidates.map(() => ({ bankA: 3910.6, stringA: [2162.9, 1747.7], fuseA: 2162.9 })),
};
const NATIVE_LOSES_LOAD: CheckAids = {
  ...AIDS,
  twins: ({ candidates }) => candidates.map(({ key }) => ({ losesLoad: key === 'native', elapsedS: 180 * 86_400 })),
};

function check(options: { json?: boolean; quiet?: boolean } = {}, aids = AIDS): MemoryShell {
  const shell = memoryShell(FILES);
  expect(checkCommand({ study: 'studies/demo.yaml', ...options }, shell, aids)).toBe(0);
  return shell;
}

describe('check', () => {
  it('prints every value with its origin, at most 100 ASCII columns wide', () => {
    const { out } = check().printed;
    expect(out).toMatch(/^stock\.older$/m);
    expect(out).toMatch(/^ {2}capacity_Ah +94 Ah +study$/m);
    expect(out).toMatch(/^ {2}capacity_Ah\.module +sd 3 % +grade older$/m);
    expect(out).toMatch(/^ {2}bms\.over_voltage\.release_V +3\.45 V +default$/m);
    expect(out).toMatch(/^ {2}block +32 +default$/m);
    for (const line of out.split('\n')) expect(line).toMatch(/^[ -~]{0,100}$/);
  });

  it('says once what all candidates have in common', () => {
    const { out } = check().printed;
    expect(out).toMatch(/^every candidate$/m);
    expect(out.match(/charger\.absorption_V/g)).toHaveLength(1);
    expect(out).toMatch(/^candidates\.cross-linked\n {2}wiring +cross-linked +study\n {2}link_mOhm +1 mOhm +study$/m);
  });

  it('tells the bank-cycles and the time of a run', () => {
    // By hand: 512 x 180 x 7 = 645120 bank-cycles, at 30000 a second 21.5 s = 0.4 min.
    expect(check().printed.out).toMatch(
      /645120 bank-cycles \(512 banks x 180 cycles x 7 candidates\), about 0\.4 min on one thread/,
    );
  });

  it('warns of a duty whose twin loses load', () => {
    const { out } = check({}, NATIVE_LOSES_LOAD).printed;
    expect(out.replaceAll('\n', ' ')).toMatch(
      /warning: the duty is too much even without spread: the twin loses load \(native\); lighten the load, charge more/,
    );
    expect(check().printed.out).not.toMatch(/even without spread/);
  });

  it('answers a twin that loses load behind a charger beyond its BMSs with the charger, not with the load', () => {
    // Two strings of 100 A each.
    const warned = (limitA: number): string => {
      const more = `bank: {charger: {limit_A: ${limitA}}}\n`;
      const shell = memoryShell({ 'a.yaml': studyWith({ more }) });
      const twins = () => [{ losesLoad: true, elapsedS: 86_400 }];
      expect(checkCommand({ study: 'a.yaml', quiet: true }, shell, { ...AIDS, twins })).toBe(0);
      return shell.printed.err;
    };
    expect(warned(250)).toMatch(/^warning: the twin loses load \(strings\); .*: lower limit_A of the charger/m);
    expect(warned(250)).not.toMatch(/lighten the load/);
    expect(warned(200)).toMatch(/the twin loses load \(strings\); lighten the load/);
  });

  it('tells the prospective short-circuit current of every candidate', () => {
    expect(check().printed.out).toMatch(/^ {2}native: 3911 A at the bus, by string 2163, 1748 A$/m);
    const document = JSON.parse(check({ json: true }).printed.out);
    expect(document.prospective_short_circuit[0]).toEqual({
      candidate: 'strings',
      bank_A: 3910.6,
      string_A: [2162.9, 1747.7],
      string_fuse_A: 2162.9,
    });
  });

  it('warns of a string fuse that cannot break it', () => {
    const warned = (breakingA: number): string => {
      const text = FILES['studies/demo.yaml'].replace(
        /^bank:.*$/m,
        `bank:\n  ratings: {fuse_breaking_A: ${breakingA}}`,
      );
      const shell = memoryShell({ ...FILES, 'studies/demo.yaml': text });
      expect(checkCommand({ study: 'studies/demo.yaml', quiet: true }, shell, AIDS)).toBe(0);
      return shell.printed.err;
    };
    expect(warned(2000)).toMatch(
      /^warning: a string fuse may have to break 2163 A, but its breaking capacity is 2000 A: take one that can break more \(native\)$/m,
    );
    expect(warned(6000)).not.toMatch(/breaking/);
  });

  it('prints one JSON document with --json', () => {
    const document = JSON.parse(check({ json: true }).printed.out);
    expect(document.estimate).toEqual({ bank_cycles: 645_120, minutes_on_one_thread: 645_120 / 30_000 / 60 });
    expect(document.study.candidates).toHaveLength(7);
    expect(document.origins).toContainEqual({ path: 'block', value: '32', unit: '', source: 'default' });
  });

  it('notes the bleed rule in force, which is nothing to be warned of', () => {
    const note =
      'bleed rule in force: each, always (stock newer); above-lowest, always (stock older); each (candidate strings-bleed)';
    expect(check().printed.out.replaceAll('\n', ' ')).toContain(`note: ${note}`);
    expect(JSON.parse(check({ json: true }).printed.out).notes).toEqual([note]);
  });

  it('notes how long the cycles take where a charge may end its phase early, and nowhere else', () => {
    const notesWith = (phase: string): readonly string[] => {
      const text = studyWith({
        duty: `duty: {phases: [${phase}, {discharge_W: 500, for_h: 8}]}`,
        candidates: '  a: {wiring: strings, modules: [[A1, A2]]}\n  b: {wiring: strings, modules: [[A3, A4]]}',
        more: 'cycles: 30\n',
      });
      const shell = memoryShell({ 'a.yaml': text });
      const twins = () => [1_296_000, 1_339_200].map((elapsedS) => ({ losesLoad: false, elapsedS }));
      expect(checkCommand({ study: 'a.yaml', json: true }, shell, { ...AIDS, twins })).toBe(0);
      return JSON.parse(shell.printed.out).notes;
    };
    // By hand: 1296000 s / 86400 = 15 days, 1339200 s / 86400 = 15.5 days.
    expect(notesWith('{charge: to-full, at_most_h: 16}')[1]).toMatch(
      /^cycles are not days: .*; 30 cycles of the twin take 15\.0 days \(a\), 15\.5 days \(b\); .* write charge_for_h/,
    );
    expect(notesWith('{charge_for_h: 16}')).toHaveLength(1);
  });

  it('takes the days that README tells of its first study from the twin', () => {
    const readme = repositoryText('README.md');
    const study = studyOf(/```yaml\n([\s\S]*?)```/.exec(readme)?.[1] ?? '');
    const days = Number(/these 30 cycles take about (\d+) days/.exec(readme)?.[1]);
    for (const { elapsedS } of simulationAids.twins(study)) expect(Math.round(elapsedS / 86_400)).toBe(days);
  });

  it('keeps warnings and leaves out table and note with --quiet', () => {
    const { out, err } = check({ quiet: true }, NATIVE_LOSES_LOAD).printed;
    expect(out).toBe('');
    expect(err).toMatch(/^warning: the duty is too much even without spread: the twin loses load \(native\)/m);
    expect(err).not.toMatch(/bleed/);
  });

  it('reports all problems on stderr with status 2', () => {
    const shell = memoryShell({ 'a.yaml': 'motleybank: 1\ninstanses: 3\nseed: -1\n' });
    expect(checkCommand({ study: 'a.yaml' }, shell, AIDS)).toBe(2);
    expect(shell.printed.out).toBe('');
    expect(shell.printed.err.split('\n').slice(0, 3)).toEqual([
      'a.yaml:1:1 stock must be a mapping of names, got nothing',
      'a.yaml:1:1 duty must be a mapping with keys among profile, phases, parts, cycle_h, ambient_degC, load_factor, charge_factor, got nothing',
      'a.yaml:1:1 candidates must be a mapping of names, got nothing',
    ]);
    expect(shell.printed.err).toMatch(/a.yaml:2:1 instanses must be a known key.*did you mean instances/);
    expect(shell.printed.err).toMatch(/5 problems; nothing was run\n$/);
  });

  it('says why a study cannot be read', () => {
    const shell = memoryShell();
    expect(checkCommand({ study: 'none.yaml' }, shell, AIDS)).toBe(2);
    expect(shell.printed.err).toBe('none.yaml cannot be read: no such file\n');
  });
});
