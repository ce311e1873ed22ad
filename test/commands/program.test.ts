import { describe, expect, it } from 'vitest';
import { EXIT_STATUS } from '../../src/commands/exit-status.js';
import { FIRST_STUDY } from '../../src/commands/new.js';
import { runProgram } from '../../src/commands/program.js';
import { studyJsonSchema } from '../../src/study/study-file.js';
import { studyOf } from '../study/study-under-test.js';
import { type MemoryShell, memoryShell } from './memory-shell.js';

async function run(args: readonly string[], shell: MemoryShell = memoryShell()) {
  const status = await runProgram(args, '9.9.9', shell);
  return { status, ...shell.printed, files: shell.files };
}

describe('the command line', () => {
  it('tells its exit statuses, an example and the caution in its help', async () => {
    const { status, out, err } = await run(['--help']);
    expect([status, err]).toEqual([0, '']);
    for (const value of Object.values(EXIT_STATUS)) expect(out).toMatch(new RegExp(`\\b${value}\\b`));
    expect(out).toMatch(/Example: motleybank/);
    expect(out).toMatch(/a study, not an approval/);
  });

  it.each(['run', 'check', 'trace', 'new', 'schema'])('has an example in the help of %s', async (command) => {
    const { status, out } = await run([command, '--help']);
    expect(status).toBe(0);
    expect(out).toMatch(new RegExp(`Example: motleybank ${command} `.trimEnd()));
  });

  it('prints its version', async () => {
    expect(await run(['--version'])).toMatchObject({ status: 0, out: '9.9.9\n' });
  });

  it.each([
    ['an unknown command', ['rum', 'x.yaml'], /unknown command 'rum'/],
    ['an unknown option', ['check', 'x.yaml', '--thread'], /unknown option '--thread'/],
    ['a missing study', ['run'], /missing required argument 'study'/],
    ['no threads', ['run', 'x.yaml', '--threads', '0'], /whole number from 1 to 1024/],
    ['a seed of nothing', ['run', 'x.yaml', '--seed', ''], /whole number of at least 0, or a text/],
    [
      'a seed below 0',
      ['run', 'x.yaml', '--seed', '-1'],
      /argument '-1' is invalid. It must be a whole number of at least 0/,
    ],
    ['a seed left out', ['run', 'x.yaml', '--seed', '--quiet'], /argument '--quiet' is invalid. It must be a whole/],
    ['a mistyped seed', ['run', 'x.yaml', '--seed', '1e3'], /a text .* that does not look like another number/],
    ['half a bank', ['run', 'x.yaml', '--instances', '1.5'], /whole number from 1 to 10000000/],
    ['a trace without its bank', ['trace', 'x', '--candidate', 'a'], /--instance/],
    ['a step of nothing', ['trace', 'x', '--candidate', 'a', '--instance', '1', '--every', '0'], /number above 0/],
  ])('refuses %s with status 2', async (_, args, message) => {
    const { status, out, err } = await run(args);
    expect(status).toBe(2);
    expect(out).toBe('');
    expect(err).toMatch(message);
  });

  it('ends with status 1, a stack and how to report it where the fault is its own', async () => {
    const shell = memoryShell();
    const broken = {
      ...shell,
      exists: () => {
        throw new Error('disk on fire');
      },
    };
    expect(await runProgram(['new', 'a.yaml'], '1', broken)).toBe(1);
    expect(shell.printed.err).toMatch(/disk on fire\n +at /);
    expect(shell.printed.err).toMatch(/report it/);
  });
});

describe('new', () => {
  it('writes a study of at most 30 lines that reads without a problem and says that it is invented', async () => {
    const { status, files, err } = await run(['new', 'first.yaml']);
    expect(status).toBe(0);
    expect(files.get('first.yaml')).toBe(FIRST_STUDY);
    expect(FIRST_STUDY.trimEnd().split('\n').length).toBeLessThanOrEqual(30);
    expect(studyOf(FIRST_STUDY).candidates).toHaveLength(3);
    expect(FIRST_STUDY).toMatch(/invented/);
    expect(err).toMatch(/motleybank run first.yaml/);
  });

  it('never overwrites', async () => {
    const { status, files, err } = await run(['new', 'mine.yaml'], memoryShell({ 'mine.yaml': 'precious' }));
    expect(status).toBe(2);
    expect(files.get('mine.yaml')).toBe('precious');
    expect(err).toMatch(/is there already/);
  });
});

describe('schema', () => {
  it('prints the JSON Schema, or writes it in place of an older one', async () => {
    const printed = await run(['schema']);
    expect(JSON.parse(printed.out)).toEqual(JSON.parse(JSON.stringify(studyJsonSchema())));
    const written = await run(['schema', '--out', 'dist/s.json'], memoryShell({ 'dist/s.json': 'old' }));
    expect(written.out).toBe('');
    expect(written.files.get('dist/s.json')).toBe(printed.out);
  });
});
