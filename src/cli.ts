#!/usr/bin/env node
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { performance } from 'node:perf_hooks';
import process from 'node:process';
import { runProgram } from './commands/program.js';
import type { Shell } from './commands/shell.js';
import { makeFolder } from './execution/make-folder.js';
import type { TextOrProblem } from './study/read-text.js';

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
  interruption: interruption.signal,
};

const manifest = new URL('../../package.json', import.meta.url);
const { version } = JSON.parse(readFileSync(manifest, 'utf8')) as { version: string };

process.exitCode = await runProgram(process.argv.slice(2), version, shell);
