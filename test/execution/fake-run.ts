import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { type Execution, executeRun } from '../../src/execution/execute-run.js';
import { Progress } from '../../src/execution/progress.js';
import { RunFolder } from '../../src/execution/run-folder.js';
import type { Study } from '../../src/study/study.js';
import { fakeKeys } from './fake-study.js';

export interface FakeRunOptions {
  readonly workerFile: URL;
  readonly threads: number;
  /** Interrupts the session after so many blocks. */
  readonly stopAfter?: number;
  readonly mayFailFraction?: number;
}

/** One session on a folder; notes are collected, progress is not. */
export async function fakeRun(
  path: string,
  study: Study,
  { workerFile, threads, stopAfter, mayFailFraction = 0 }: FakeRunOptions,
): Promise<Execution & { readonly notes: string }> {
  const stop = new AbortController();
  let notes = '';
  let minutes = 0;
  const progress = new Progress({
    terminal: false,
    // More than a minute passes at each look, so that every block makes a line.
    nowMs: () => minutes++ * 61_000,
    write: (text) => {
      const done = /^(\d+) of \d+ blocks/.exec(text)?.[1];
      if (done === undefined) notes += text;
      else if (Number(done) === stopAfter) stop.abort();
    },
  });
  const folder = await RunFolder.open(path, []);
  try {
    const keys = fakeKeys(study);
    const execution = await executeRun({
      study,
      keys,
      folder,
      workerFile,
      threads,
      stallMs: 60_000,
      mayFailFraction,
      stop: stop.signal,
      progress,
    });
    return { ...execution, notes };
  } finally {
    await folder.close();
  }
}

/** Every file under `outcomes`, by name: the part of a folder that must be the same for every run of a study. */
export function outcomeFiles(path: string): Record<string, string> {
  const root = join(path, 'outcomes');
  const names = readdirSync(root, { recursive: true, encoding: 'utf8' }).filter((name) => /\.\w+$/.test(name));
  return Object.fromEntries(names.sort().map((name) => [name, readFileSync(join(root, name), 'utf8')]));
}

/** Temporary folders that go away together. */
export class Scratch {
  readonly #root = mkdtempSync(join(tmpdir(), 'motleybank-'));
  #count = 0;

  /** A name that nothing has yet. */
  next(): string {
    this.#count++;
    return join(this.#root, `run ${this.#count}`);
  }

  remove(): void {
    rmSync(this.#root, { recursive: true, force: true });
  }
}
