import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { FIRST_STUDY } from '../../src/commands/new.js';
import { unwritableFolder } from '../execution/unwritable-folder.js';
import { TREE } from './packed.js';

// Status 1 is reached in test/commands/program.test.ts and run.test.ts, 3 and 4 in run-looks.test.ts, 5 in run.test.ts, 7 in
// verify.test.ts, 129, 130 and 143 in run-signals.test.ts: they need a simulation that can be made to fail or to take its time.

const CLI = join(TREE, 'dist', 'src', 'cli.js');
let folder: string;

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'motleybank-status-'));
  writeFileSync(join(folder, 'good.yaml'), FIRST_STUDY);
  writeFileSync(join(folder, 'bad.yaml'), FIRST_STUDY.replace('instances: 128', 'instances: many'));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

async function command(...args: readonly string[]) {
  const child = spawn(process.execPath, [CLI, ...args], { cwd: folder, stdio: ['ignore', 'pipe', 'pipe'] });
  let [out, err] = ['', ''];
  child.stdout.on('data', (text) => {
    out += text;
  });
  child.stderr.on('data', (text) => {
    err += text;
  });
  const [status] = await once(child, 'close');
  return { status, out, err };
}

describe('the exit status of the built program', () => {
  it('is 0 when all is done', async () => {
    const { status, out } = await command('check', 'good.yaml', '--quiet');
    expect([status, out]).toEqual([0, '']);
  });

  it('is 2 for a study with a fault, which is told with its place', async () => {
    const { status, out, err } = await command('run', 'bad.yaml');
    expect([status, out]).toEqual([2, '']);
    expect(err).toMatch(/^bad\.yaml:4:12 instances must be .*, got "many"\n/);
  });

  it.each([
    ['a study that is not there', ['run', 'none.yaml'], /none\.yaml cannot be read: no such file/],
    ['a folder in place of a study', ['check', '.'], /cannot be read: it is a folder/],
    ['a command that is none', ['rum'], /unknown command 'rum'/],
    ['an option that is none', ['run', 'good.yaml', '--treads', '2'], /unknown option '--treads'/],
  ])('is 2 for %s', async (_, args, message) => {
    const { status, out, err } = await command(...args);
    expect([status, out]).toEqual([2, '']);
    expect(err).toMatch(message);
    expect(err).not.toMatch(/\n +at /);
  });

  it.each([
    ['run', ['run', 'good.yaml', '--out', 'good.yaml/x/y'], /^good\.yaml\/x\/y cannot be used: ENOTDIR.*\n$/],
    [
      'new',
      ['new', 'good.yaml/x/a.yaml'],
      /^good\.yaml\/x\/a\.yaml cannot be written: a part of its path is a file\n$/,
    ],
    ['schema', ['schema', '--out', 'good.yaml/a'], /^good\.yaml\/a cannot be written: a part of its path is a file\n$/],
  ])('is 2 with one message for a folder below a file, %s', async (_, args, message) => {
    const { status, out, err } = await command(...args);
    expect([status, out]).toEqual([2, '']);
    expect(err).toMatch(message);
  });

  it.runIf(process.platform === 'linux')('is 2 with one message for a folder that cannot be written', async () => {
    const { status, out, err } = await command('run', 'good.yaml', '--out', unwritableFolder(join(folder, 'full')));
    expect([status, out]).toEqual([2, '']);
    expect(err).toMatch(/^\S+ cannot be used: ENAMETOOLONG.*\n$/);
  });

  it.runIf(process.platform === 'linux').each([
    ['run', ['run', 'good.yaml', '--out', '/proc/x'], /^\/proc\/x cannot be used: ENOENT.*\n$/],
    ['new', ['new', '/proc/x/a.yaml'], /^\/proc\/x\/a\.yaml cannot be written: no folder can be made there\n$/],
  ])('is 2 with one message where the system makes no folder, %s', async (_, args, message) => {
    const { status, out, err } = await command(...args);
    expect([status, out]).toEqual([2, '']);
    expect(err).toMatch(message);
  });

  it('is 0 when the reader of a pipe goes away early', async () => {
    const child = spawn(process.execPath, [CLI, 'schema'], { stdio: ['ignore', 'pipe', 'pipe'] });
    child.stdout.destroy();
    let err = '';
    child.stderr.on('data', (text) => {
      err += text;
    });
    const [status] = await once(child, 'close');
    expect([status, err]).toEqual([0, '']);
  });
});
