import { type ChildProcess, spawn, spawnSync } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { fileURLToPath, pathToFileURL } from 'node:url';
import seedrandom from 'seedrandom';
import { afterAll, describe, expect, it } from 'vitest';
import { sha256 } from '../../src/execution/checksum.js';
import { readJournal } from '../../src/execution/journal.js';
import { blockFile } from '../../src/execution/run-folder.js';
import { Scratch } from './fake-run.js';

// The built program with the real engine, as a user starts it.
const CLI = fileURLToPath(new URL('../../dist/src/cli.js', import.meta.url));
const END_THREADS = pathToFileURL(fileURLToPath(new URL('end-threads.mjs', import.meta.url))).href;
const ROUNDS = 36;
const SEED = 'chaos 2026-12-01';
/** Left out of the contract: the order of finished blocks, how long they took, and who was interrupted when. */
const NOT_THE_RESULT = ['journal.jsonl', 'run.json'];

const STUDY = `motleybank: 1
title: Two strings, interrupted all the time (invented)
seed: 11
instances: 720
block: 8
cycles: 8
stock:
  new: {grade: new-same-make, modules: [A1, A2], rated_Ah: 100}
  old: {grade: older, modules: [B1, B2], rated_Ah: 100}
duty:
  phases: [{discharge_W: 800, for_h: 4}, {rest_h: 1}, {charge: to-full, at_most_h: 8}]
  load_factor: {nominal: 1, bank_sd_percent: 10}
candidates:
  apart: {wiring: strings, modules: [[A1, A2], [B1, B2]]}
  tied: {wiring: cross-linked, modules: [[A1, A2], [B1, B2]], link_mOhm: 1}
`;
const BLOCKS = 182; // by hand: 2 candidates x (1 twin + 90 blocks of 8)

const scratch = new Scratch();
afterAll(() => scratch.remove());
const random = seedrandom(SEED);
const below = (count: number) => Math.floor(random() * count);

/** A folder with the study in it; results come into `out`. */
function place(): { home: string; out: string } {
  const home = scratch.next();
  mkdirSync(home, { recursive: true });
  writeFileSync(join(home, 'study.yaml'), STUDY);
  return { home, out: join(home, 'out') };
}

function words(command: string, ...more: readonly string[]): string[] {
  return [CLI, command, ...more];
}

function toTheEnd(home: string) {
  const { status, stderr, stdout } = spawnSync(
    process.execPath,
    words('run', 'study.yaml', '--out', 'out', '--threads', '2'),
    { cwd: home, encoding: 'utf8' },
  );
  return { status, stderr, stdout };
}

/** Every result by name. */
function contents(folder: string): Record<string, string> {
  const names = readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && !NOT_THE_RESULT.includes(entry.name))
    .map((entry) => join(entry.parentPath, entry.name))
    .sort();
  return Object.fromEntries(names.map((name) => [name.slice(folder.length), readFileSync(name, 'utf8')]));
}

/** Finished blocks of a folder, each of which is there as it was written. */
function finished(out: string): number {
  const journal = join(out, 'journal.jsonl');
  if (!existsSync(journal)) return 0;
  const { entries, damagedLines } = readJournal(readFileSync(journal, 'utf8'));
  expect(damagedLines).toEqual([]);
  for (const entry of entries) expect(sha256(readFileSync(join(out, blockFile(entry)), 'utf8'))).toBe(entry.sha256);
  return entries.length;
}

const DEEDS = ['SIGKILL', 'SIGKILL', 'SIGKILL', 'SIGINT', 'SIGTERM', 'SIGHUP', 'SIGINT twice', 'threads'] as const;

/** Statuses of a run that is disturbed: interrupted, complete, or with a block given up; while it starts a signal ends it. */
const STATUSES = new Set([129, 130, 143, 0, 5]);

/** Starts a run, disturbs it at some moment, and waits for its end. */
async function round(home: string, out: string, number: number): Promise<string> {
  const deed = DEEDS[below(DEEDS.length)] ?? 'SIGKILL';
  // At any moment of its start, or after some blocks, in the middle of the next ones.
  const blocks = finished(out) + (below(4) === 0 ? 0 : 1 + below(3));
  const delayMs = below(blocks === 0 ? 500 : 40);
  const child = spawn(process.execPath, words('run', 'study.yaml', '--out', 'out', '--threads', '2', '--quiet'), {
    cwd: home,
    stdio: ['ignore', 'ignore', 'pipe'],
    env:
      deed === 'threads'
        ? { ...process.env, NODE_OPTIONS: `--import ${END_THREADS}`, CHAOS_SEED: String(number) }
        : process.env,
  });
  let faults = '';
  child.stderr?.on('data', (chunk) => {
    faults += chunk;
  });
  const end = once(child, 'close');
  while (linesOf(out) < blocks && child.exitCode === null) await pause(5);
  await pause(delayMs);
  await disturb(child, deed);
  const [status, signal] = await end;
  if (signal === null) expect(STATUSES, `round ${number}, ${deed}: ${faults}`).toContain(status);
  expect(faults).not.toContain('fault of motleybank');
  return `${deed}: ${signal ?? status}`;
}

async function disturb(child: ChildProcess, deed: (typeof DEEDS)[number]): Promise<void> {
  if (deed === 'SIGINT twice') {
    child.kill('SIGINT');
    await pause(below(60));
    child.kill('SIGINT');
  } else child.kill(deed === 'threads' ? 'SIGKILL' : deed);
}

function linesOf(out: string): number {
  const journal = join(out, 'journal.jsonl');
  return existsSync(journal) ? readFileSync(journal, 'utf8').split('"block":').length - 1 : 0;
}

function flipBit(file: string): void {
  const bytes = readFileSync(file);
  const bit = below(bytes.length * 8);
  bytes.writeUInt8(bytes.readUInt8(bit >> 3) ^ (1 << (bit & 7)), bit >> 3);
  writeFileSync(file, bytes);
}

describe(`a run that is disturbed in ${ROUNDS} rounds`, () => {
  it('loses no finished block and ends byte for byte as one that was not, whatever bit is flipped then', async () => {
    const [chaos, calm] = [place(), place()];
    expect(toTheEnd(calm.home).status).toBe(0);
    const undisturbed = contents(calm.out);
    const ends: string[] = [];
    for (let number = 1; number <= ROUNDS; number++) {
      const before = finished(chaos.out);
      ends.push(await round(chaos.home, chaos.out, number));
      expect(finished(chaos.out)).toBeGreaterThanOrEqual(before);
    }
    // Most rounds must have met a run at work, or little has been shown.
    expect(ends.filter((end) => !end.endsWith(': 0')).length, ends.join(', ')).toBeGreaterThanOrEqual(30);
    expect(toTheEnd(chaos.home).status).toBe(0);
    expect(contents(chaos.out)).toEqual(undisturbed);
    expect(finished(chaos.out)).toBe(BLOCKS);

    for (const name of [
      'outcomes/apart/block-0017.csv',
      'outcomes/tied/twin.csv',
      'journal.jsonl',
      'study.resolved.json',
    ]) {
      flipBit(join(chaos.out, name));
      const verified = spawnSync(process.execPath, words('verify', 'out', '--blocks', '2'), {
        cwd: chaos.home,
        encoding: 'utf8',
      });
      expect(verified.status).toBe(7);
      expect(verified.stdout).toContain(name);
      const mended = toTheEnd(chaos.home);
      expect(mended.status).toBe(0);
      expect(mended.stderr).toMatch(new RegExp(`^${name}.* not as `));
      expect(contents(chaos.out)).toEqual(undisturbed);
    }
  }, 900_000);
});
