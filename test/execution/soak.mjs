// npm run soak -- [MINUTES]: one run that goes on for so long, with the memory of its process sampled; fails where that
// does not stay within 20 MB after the warm-up. Linux only: memory is read from /proc.
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { CLI, inScratch, memoryMb, oneCycleStudy } from './memory-of-runs.mjs';

const MOST_CHANGE_MB = 20;
const SAMPLE_S = 5;

const minutes = Number(process.argv[2] ?? 60);
if (!(minutes > 0)) throw new RangeError(`minutes must be above 0, got ${process.argv[2]}`);

await inScratch(async (home) => {
  oneCycleStudy(home, 10_000_000);
  const started = performance.now();
  const elapsedS = () => (performance.now() - started) / 1000;
  const child = spawn(process.execPath, [CLI, 'run', 'study.yaml', '--out', 'out', '--quiet'], {
    cwd: home,
    stdio: ['ignore', 'ignore', 'inherit'],
  });
  const ended = once(child, 'close');
  const samples = [];
  say('elapsed_s,resident_MB');
  while (elapsedS() < minutes * 60 && child.exitCode === null) {
    await pause(SAMPLE_S * 1000);
    const sample = { s: elapsedS(), mb: memoryMb(child.pid, 'VmRSS') };
    samples.push(sample);
    say(`${sample.s.toFixed(0)},${sample.mb.toFixed(1)}`);
  }
  if (child.exitCode !== null) throw new Error(`the run ended by itself with ${child.exitCode}`);
  const blocks = readdirSync(join(home, 'out', 'outcomes', 'apart')).length;
  // What is computed is not to be summarised: that is another matter, and takes its own memory.
  child.kill('SIGKILL');
  await ended;
  report(samples, blocks);
});

/** The first tenth, and no less than a minute, is the warm-up; then levels are medians, because collections make teeth. */
function report(samples, blocks) {
  const warmUpS = Math.max(60, minutes * 6);
  const levels = medians(samples.filter(({ s }) => s > warmUpS));
  if (levels.length < 2) throw new RangeError('too short: fewer than two minutes are left after the warm-up');
  const [least, greatest] = [Math.min(...levels), Math.max(...levels)];
  say(`${blocks} blocks; by the minute after the warm-up from ${least.toFixed(1)} to ${greatest.toFixed(1)} MB`);
  if (greatest - least <= MOST_CHANGE_MB) return;
  process.stderr.write(`memory is not flat within ${MOST_CHANGE_MB} MB\n`);
  process.exitCode = 1;
}

/** The median of every minute. */
function medians(samples) {
  const byMinute = new Map();
  for (const { s, mb } of samples) {
    const minute = Math.floor(s / 60);
    byMinute.set(minute, [...(byMinute.get(minute) ?? []), mb]);
  }
  return [...byMinute.values()].map(median);
}

function median(values) {
  const ascending = values.toSorted((one, other) => one - other);
  return ascending[Math.floor(ascending.length / 2)];
}

function say(line) {
  process.stdout.write(`${line}\n`);
}
