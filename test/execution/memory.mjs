// npm run memory -- [MANY] [FEW]: peak memory of a whole run of many banks and of one of few, answers included; fails
// where they differ by more than 100 MB. Linux only: memory is read from /proc.
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { CLI, inScratch, memoryMb, oneCycleStudy } from './memory-of-runs.mjs';

const MOST_DIFFERENCE_MB = 100;
const [many = 100_000, few = 1000] = process.argv.slice(2).map(Number);

const peaksMb = [];
for (const instances of [few, many]) {
  await inScratch(async (home) => {
    oneCycleStudy(home, instances);
    const started = performance.now();
    const child = spawn(process.execPath, [CLI, 'run', 'study.yaml', '--out', 'out', '--quiet'], {
      cwd: home,
      stdio: ['ignore', 'ignore', 'inherit'],
    });
    let peakMb = 0;
    // The peak is the kernel's own; it is asked for often, because nobody can be asked after the end.
    const look = setInterval(() => {
      try {
        peakMb = memoryMb(child.pid, 'VmHWM') || peakMb;
      } catch {
        // Between the end of a process and its notice there is nothing to be read.
      }
    }, 20);
    const [status] = await once(child, 'close');
    clearInterval(look);
    if (status !== 0) throw new Error(`the run of ${instances} banks ended with ${status}`);
    peaksMb.push(peakMb);
    process.stdout.write(
      `${instances} banks: at most ${peakMb.toFixed(1)} MB, ${((performance.now() - started) / 1000).toFixed(0)} s\n`,
    );
  });
}
const differenceMb = peaksMb[1] - peaksMb[0];
process.stdout.write(`difference ${differenceMb.toFixed(1)} MB\n`);
if (differenceMb > MOST_DIFFERENCE_MB) {
  process.stderr.write(`more than ${MOST_DIFFERENCE_MB} MB\n`);
  process.exitCode = 1;
}
