import { type ChildProcess, type SpawnOptions, spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { compileWithFakeEngine } from '../execution/program-with-fake-engine.js';

/** 10 blocks of 4 banks for each of 2 candidates, a fifth of a second each; 22 blocks with the twins. */
export const SLOW_STUDY = `motleybank: 1
title: slow 50
seed: 7
instances: 40
block: 4
cycles: 3
stock:
  newer: {grade: new-same-make, modules: [N1, N2], cells_in_series: 4, capacity_Ah: {nominal: 100}}
bank:
  charger: {limit_A: 60, absorption_V: 28.4, until: {tail_A: 4}, float_V: 27.2}
duty:
  phases: [{rest_h: 1}]
candidates:
  strings: {wiring: strings, modules: [[N1, N2]]}
  turned: {wiring: strings, modules: [[N2, N1]]}
reference: strings
`;
export const SLOW_BLOCKS = 22;

/** A run of the whole program in a process of its own. */
export interface CliRun {
  readonly child: ChildProcess;
  /** All it wrote to stderr so far. */
  readonly notes: () => string;
  readonly end: Promise<{ readonly status: number | null; readonly signal: string | null }>;
}

/** The whole program with the fake engine, started as a user does: `cabin.yaml` of a folder, into its `results/cabin`. */
export class FakeCli {
  readonly #program = compileWithFakeEngine(['src/cli.ts']);

  get file(): string {
    return this.#program.compiled('src/cli.ts');
  }

  run(folder: string, more: readonly string[] = [], study = SLOW_STUDY, options: SpawnOptions = {}): CliRun {
    mkdirSync(folder, { recursive: true });
    writeFileSync(join(folder, 'cabin.yaml'), study);
    const args = [this.file, 'run', 'cabin.yaml', '--threads', '2', ...more];
    const child = spawn(process.execPath, args, { cwd: folder, stdio: ['ignore', 'pipe', 'pipe'], ...options });
    let text = '';
    child.stderr?.on('data', (chunk) => {
      text += chunk;
    });
    child.stdout?.resume();
    const end = once(child, 'close').then(([status, signal]) => ({ status, signal }));
    return { child, notes: () => text, end };
  }

  remove(): void {
    this.#program.remove();
  }
}

/** Blocks in the journal of a folder of results. */
export function finishedBlocks(results: string): number {
  const journal = join(results, 'journal.jsonl');
  return existsSync(journal) ? readFileSync(journal, 'utf8').split('"block":').length - 1 : 0;
}

/** @throws Error if the run ends before it has so many */
export async function untilBlocks({ child, notes }: CliRun, results: string, blocks: number): Promise<void> {
  while (finishedBlocks(results) < blocks) {
    if (child.exitCode !== null) throw new Error(`the run ended with ${child.exitCode} too early: ${notes()}`);
    await pause(10);
  }
}
