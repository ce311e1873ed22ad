#!/usr/bin/env node
import { existsSync, readFileSync } from 'node:fs';
import { performance } from 'node:perf_hooks';
import process from 'node:process';
import { runProgram } from './commands/program.js';
import type { Shell } from './commands/shell.js';
import { readText, writeText } from './commands/text-files.js';

// The only file that touches the process: it makes the real shell, runs one command line and sets the exit status.

const interruption = new AbortController();

for (const signal of ['SIGINT', 'SIGTERM'] as const) {
  process.once(signal, () => {
    interruption.abort(signal);
    // Whoever asks twice does not want to wait for what is being finished.
    process.once(signal, () => process.exit(signal === 'SIGINT' ? 130 : 143));
  });
}

// The reader of a pipe may go away at any time; that is its right and no fault.
for (const stream of [process.stdout, process.stderr]) {
  stream.on('error', (error: NodeJS.ErrnoException) => {
    if (error.code === 'EPIPE') process.exit();
    throw error;
  });
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
  interruption: interruption.signal,
};

const manifest = new URL('../../package.json', import.meta.url);
const { version } = JSON.parse(readFileSync(manifest, 'utf8')) as { version: string };

process.exitCode = await runProgram(process.argv.slice(2), version, shell);
