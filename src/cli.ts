#!/usr/bin/env node
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { performance } from 'node:perf_hooks';
import process from 'node:process';
import { EXIT_STATUS, STATUS_OF_SIGNAL } from './commands/exit-status.js';
import { runProgram } from './commands/program.js';
import type { Shell } from './commands/shell.js';
import { makeFolder } from './execution/make-folder.js';
import type { TextOrProblem } from './study/read-text.js';

// The only file that touches the process: it makes the real shell, runs one command line and sets the exit status.

const interruption = new AbortController();

function listenForInterruption(): AbortSignal {
  if (process.listenerCount('SIGINT') > 0) return interruption.signal;
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
    process.on(signal, () => {
      // Whoever asks twice does not want to wait for what is being finished.
      if (interruption.signal.aborted) process.exit(STATUS_OF_SIGNAL[signal]);
      interruption.abort(signal);
    });
  }
  return interruption.signal;
}

// The reader of a pipe, or the terminal, may go away at any time; that is its right and no fault. A run goes on without
// them: its results are in its folder.
const READER_IS_GONE = ['EPIPE', 'EIO'];
let isPrinted = true;

process.stderr.on('error', () => undefined);
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (READER_IS_GONE.includes(error.code ?? '') || !isPrinted) return;
  isPrinted = false;
  process.stderr.write(`the output cannot be written: ${reasonOf(error)}\n`);
});
process.on('exit', (status) => {
  if (status === EXIT_STATUS.done && !isPrinted) process.exitCode = EXIT_STATUS.input;
});

const REASONS: Readonly<Record<string, string>> = {
  ENOENT: 'no such file',
  EISDIR: 'it is a folder',
  EACCES: 'no permission',
  EPERM: 'no permission',
  EEXIST: 'it is there already',
  ENOTDIR: 'a part of its path is a file',
  ENOSPC: 'no space is left',
};

/** Where a folder is to be made, two codes mean something else than for a file. */
const FOLDER_REASONS: Readonly<Record<string, string>> = {
  ENOENT: 'no folder can be made there',
  EEXIST: 'a part of its path is a file',
};

function reasonOf(error: unknown): string {
  const { code = '', syscall = '' }: Partial<NodeJS.ErrnoException> = error instanceof Error ? error : {};
  const reason = syscall === 'mkdir' ? (FOLDER_REASONS[code] ?? REASONS[code]) : REASONS[code];
  return reason ?? (error instanceof Error ? error.message : String(error));
}

function readText(path: string): TextOrProblem {
  try {
    return { text: new TextDecoder('utf-8', { fatal: true }).decode(readFileSync(path)) };
  } catch (error) {
    if (error instanceof TypeError) return { problem: 'it is no UTF-8 text' };
    return { problem: reasonOf(error) };
  }
}

function writeText(path: string, text: string, flag: 'wx' | 'w'): string | null {
  try {
    makeFolder(dirname(path));
    writeFileSync(path, text, { flag });
    return null;
  } catch (error) {
    return reasonOf(error);
  }
}

const shell: Shell = {
  out: (text) => process.stdout.write(text),
  err: (text) => process.stderr.write(text),
  readText,
  createText: (path, text) => writeText(path, text, 'wx'),
  replaceText: (path, text) => writeText(path, text, 'w'),
  exists: existsSync,
  isTerminal: { out: process.stdout.isTTY === true, err: process.stderr.isTTY === true },
  color: process.stdout.isTTY === true && !process.env.NO_COLOR,
  now: () => performance.now(),
  interruption: listenForInterruption,
};

const manifest = new URL('../../package.json', import.meta.url);
const { version } = JSON.parse(readFileSync(manifest, 'utf8')) as { version: string };

process.exitCode = await runProgram(process.argv.slice(2), version, shell);
