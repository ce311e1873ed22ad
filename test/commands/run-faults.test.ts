import { execFileSync, spawnSync } from 'node:child_process';
import {
  closeSync,
  existsSync,
  mkdirSync,
  openSync,
  readdirSync,
  readFileSync,
  renameSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { outcomeFiles, Scratch } from '../execution/fake-run.js';
import { FakeCli, finishedBlocks, SLOW_BLOCKS, SLOW_STUDY, untilBlocks } from './fake-cli.js';

let cli: FakeCli;
const scratch = new Scratch();
const QUICK = SLOW_STUDY.replace('slow 50', 'slow 5');
let undisturbed: Record<string, string>;

beforeAll(async () => {
  cli = new FakeCli();
  const folder = scratch.next();
  expect(await cli.run(folder, [], QUICK).end).toEqual({ status: 0, signal: null });
  undisturbed = outcomeFiles(join(folder, 'results', 'cabin'));
});
afterAll(() => {
  cli.remove();
  scratch.remove();
});

/** A folder of its own, and where the results of a run will be. */
function place() {
  const folder = scratch.next();
  return { folder, results: join(folder, 'results', 'cabin') };
}

/** The same command on the same folder, to its end. */
async function takeUp(folder: string) {
  const run = cli.run(folder, [], QUICK);
  const { status } = await run.end;
  return { status, notes: run.notes() };
}

describe('a folder that goes away while a run goes on', () => {
  it('removed, ends the run with status 5 and is not made again', async () => {
    const { folder, results } = place();
    const run = cli.run(folder);
    await untilBlocks(run, results, 3);
    rmSync(results, { recursive: true });
    expect(await run.end).toEqual({ status: 5, signal: null });
    expect(run.notes()).toContain('results/cabin was removed or moved while the run went on\n');
    expect(run.notes()).not.toContain('fault of motleybank');
    expect(existsSync(results)).toBe(false);
    expect(await takeUp(folder)).toMatchObject({ status: 0 });
    expect(outcomeFiles(results)).toEqual(undisturbed);
  });

  it('moved, keeps what it had, and is taken up where it is', async () => {
    const { folder, results } = place();
    const run = cli.run(folder);
    await untilBlocks(run, results, 3);
    renameSync(results, join(folder, 'elsewhere'));
    expect(await run.end).toEqual({ status: 5, signal: null });
    expect(existsSync(results)).toBe(false);
    const kept = finishedBlocks(join(folder, 'elsewhere'));
    expect(kept).toBeGreaterThanOrEqual(3);
    const again = cli.run(folder, ['--out', 'elsewhere'], QUICK);
    expect(await again.end).toEqual({ status: 0, signal: null });
    expect(again.notes()).toMatch(new RegExp(`, ${SLOW_BLOCKS - kept} of ${SLOW_BLOCKS} blocks computed in`));
    expect(outcomeFiles(join(folder, 'elsewhere'))).toEqual(undisturbed);
  });
});

describe('a disk that is full', () => {
  /** Whether this process may mount a file system: a container's root may, a user may not. */
  function mounted(size: string, folder: string): boolean {
    mkdirSync(folder, { recursive: true });
    return spawnSync('mount', ['-t', 'tmpfs', '-o', `size=${size}`, 'tmpfs', folder]).status === 0;
  }
  const probe = scratch.next();
  const canMount = mounted('64k', probe);
  if (canMount) execFileSync('umount', [probe]);
  else process.stderr.write('No file system can be mounted here: full and read-only disks are left untested.\n');

  /** A file system of its own, removed afterwards. */
  async function onDisk(size: string, use: (folder: string) => Promise<void>): Promise<void> {
    const folder = scratch.next();
    expect(mounted(size, folder)).toBe(true);
    try {
      await use(folder);
    } finally {
      execFileSync('umount', ['--lazy', folder]);
    }
  }

  it.runIf(canMount)('ends the run with status 5 and keeps what is finished; with room it is taken up', async () => {
    await onDisk('4m', async (folder) => {
      const results = join(folder, 'results', 'cabin');
      mkdirSync(folder, { recursive: true });
      const ballast = join(folder, 'ballast');
      const run = cli.run(folder);
      await untilBlocks(run, results, 5);
      expect(spawnSync('dd', ['if=/dev/zero', `of=${ballast}`, 'bs=1k']).status).toBe(1);
      expect(await run.end).toEqual({ status: 5, signal: null });
      expect(run.notes()).toMatch(/ENOSPC: no space left on device/);
      expect(run.notes()).toMatch(/\d+ blocks missing in results\/cabin; the same command takes them up\n$/);
      expect(run.notes()).not.toContain('fault of motleybank');
      const kept = finishedBlocks(results);
      expect(kept).toBeGreaterThanOrEqual(5);
      const again = cli.run(folder, [], QUICK);
      expect(await again.end).toMatchObject({ status: 5 });
      rmSync(ballast);
      const { status, notes } = await takeUp(folder);
      expect(status).toBe(0);
      expect(Number(/, (\d+) of 22 blocks computed in/.exec(notes)?.[1])).toBeLessThanOrEqual(SLOW_BLOCKS - kept);
      expect(outcomeFiles(results)).toEqual(undisturbed);
      expect(
        readdirSync(results, { recursive: true, encoding: 'utf8' }).filter((name) => name.endsWith('.tmp')),
      ).toEqual([]);
    });
  });

  it.runIf(canMount)('that becomes read-only ends the run with status 5, one that was refuses it with 2', async () => {
    const { folder, results } = place();
    const run = cli.run(folder, ['--out', results]);
    await untilBlocks(run, results, 6);
    // The journal is open, so the file system itself cannot change; what is opened from now on is.
    execFileSync('mount', ['--bind', results, results]);
    execFileSync('mount', ['-o', 'remount,ro,bind', results]);
    try {
      expect(await run.end).toEqual({ status: 5, signal: null });
      expect(run.notes()).toMatch(/EROFS: read-only file system.*\nended with \d+ of 40 banks/);
      const refused = cli.run(folder, ['--out', results]);
      expect(await refused.end).toMatchObject({ status: 2 });
      expect(refused.notes()).toMatch(/results\/cabin cannot be used: EROFS: read-only file system/);
    } finally {
      execFileSync('umount', ['--lazy', results]);
    }
    expect(await takeUp(folder)).toMatchObject({ status: 0 });
    expect(outcomeFiles(results)).toEqual(undisturbed);
  });

  it.skipIf(process.platform === 'win32')('by a limit to the size of files ends alike', async () => {
    const folder = scratch.next();
    mkdirSync(folder, { recursive: true });
    writeFileSync(join(folder, 'cabin.yaml'), QUICK);
    // 4 blocks of 512 bytes: the study fits, a block of banks does not.
    const command = `ulimit -f 4; exec "${process.execPath}" "${cli.file}" run cabin.yaml --threads 2`;
    const { status, stderr } = spawnSync('sh', ['-c', command], { cwd: folder, encoding: 'utf8' });
    expect(status).toBe(5);
    expect(stderr).toMatch(/EFBIG: file too large/);
    expect(stderr).not.toContain('fault of motleybank');
    expect(await takeUp(folder)).toMatchObject({ status: 0 });
    expect(outcomeFiles(join(folder, 'results', 'cabin'))).toEqual(undisturbed);
  });

  it.runIf(existsSync('/dev/full'))(
    'for the printed table is told with status 2; the results are in the folder',
    () => {
      const folder = scratch.next();
      mkdirSync(folder, { recursive: true });
      writeFileSync(join(folder, 'cabin.yaml'), QUICK);
      const full = openSync('/dev/full', 'w');
      const { status, stderr } = spawnSync(process.execPath, [cli.file, 'run', 'cabin.yaml', '--quiet'], {
        cwd: folder,
        encoding: 'utf8',
        stdio: ['ignore', full, 'pipe'],
      });
      closeSync(full);
      expect([status, stderr]).toEqual([2, 'the output cannot be written: no space is left\n']);
      expect(existsSync(join(folder, 'results', 'cabin', 'summary.csv'))).toBe(true);
    },
  );
});

describe('a reader that goes away', () => {
  it.each([
    ['stderr', ['ignore', 'ignore', 'pipe']],
    ['stdout', ['ignore', 'pipe', 'ignore']],
  ] as const)('of %s does not end a run', async (stream, stdio) => {
    const folder = scratch.next();
    const { child, end } = cli.run(folder, [], SLOW_STUDY, { stdio: [...stdio] });
    child[stream]?.destroy();
    expect(await end).toEqual({ status: 0, signal: null });
    expect(outcomeFiles(join(folder, 'results', 'cabin'))).toEqual(undisturbed);
  });

  it.skipIf(process.platform === 'win32')('of a command that only prints ends it quietly', () => {
    const command = `"${process.execPath}" "${cli.file}" schema | head -c 10`;
    const { status, stdout, stderr } = spawnSync('sh', ['-c', command], { encoding: 'utf8' });
    expect([status, stdout.length, stderr]).toEqual([0, 10, '']);
  });
});

describe('a clock that is set back while a run goes on', () => {
  it('changes no outcome, no duration and no lock', async () => {
    const folder = scratch.next();
    mkdirSync(folder, { recursive: true });
    // The clock of the process, not the machine's: that is everybody's.
    const back = join(folder, 'set-back.mjs');
    writeFileSync(
      back,
      `const real = Date.now.bind(Date), start = real();
       const now = () => real() - (real() > start + 300 ? 86_400_000 : 0);
       globalThis.Date = class extends Date {
         constructor(...words) { super(...(words.length === 0 ? [now()] : words)); }
         static now() { return now(); }
       };`,
    );
    const results = join(folder, 'results', 'cabin');
    const first = cli.run(folder, [], SLOW_STUDY, {
      env: { ...process.env, NODE_OPTIONS: `--import ${pathToFileURL(back).href}` },
    });
    await untilBlocks(first, results, 4);
    const second = cli.run(folder, [], QUICK);
    expect(await second.end).toMatchObject({ status: 2 });
    expect(second.notes()).toContain('is held by a run that goes on');
    first.child.kill('SIGKILL');
    await first.end;
    expect(await takeUp(folder)).toMatchObject({ status: 0 });
    expect(outcomeFiles(results)).toEqual(undisturbed);
    const { sessions } = JSON.parse(readFileSync(join(results, 'run.json'), 'utf8'));
    expect(sessions).toHaveLength(2);
    expect(sessions[1].duration_s).toBeGreaterThan(0);
    expect(Date.parse(sessions[0].started)).toBeLessThan(Date.parse(sessions[1].started));
  });
});
