#!/usr/bin/env node
import { existsSync, readFileSync } from 'node:fs';
import { performance } from 'node:perf_hooks';
import process from 'node:process';
import { EXIT_STATUS, STATUS_OF_SIGNAL } from './commands/exit-status.js';
import { runProgram } from './commands/program.js';
import type { Shell } from './commands/shell.js';
import { readText, reasonOf, writeText } from './commands/text-files.js';

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
