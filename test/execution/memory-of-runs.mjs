// What the commands that measure the memory of runs share.
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The built program. */
export const CLI = fileURLToPath(new URL('../../dist/src/cli.js', import.meta.url));

/** A fast study of one cycle (invented), as `study.yaml` of a folder. */
export function oneCycleStudy(home, instances) {
  const text = `motleybank: 1
title: One cycle (invented)
seed: 11
instances: ${instances}
cycles: 1
stock: {pair: {grade: new-same-make, modules: [A, B], rated_Ah: 100}}
duty: {phases: [{discharge_W: 400, for_h: 4}, {charge: to-full, at_most_h: 8}]}
candidates: {apart: {wiring: strings, modules: [[A, B]]}}
`;
  writeFileSync(join(home, 'study.yaml'), text);
}

/** Memory of a process in MB (10^6 bytes): `VmRSS` now, `VmHWM` at most so far. */
export function memoryMb(pid, field) {
  const [, kib] = new RegExp(`^${field}:\\s+(\\d+) kB`, 'm').exec(readFileSync(`/proc/${pid}/status`, 'utf8')) ?? [];
  return (Number(kib) * 1024) / 1e6;
}

/** Gives a folder that is removed afterwards. */
export async function inScratch(use) {
  const home = mkdtempSync(join(tmpdir(), 'motleybank-memory-'));
  try {
    await use(home);
  } finally {
    rmSync(home, { recursive: true, force: true });
  }
}
