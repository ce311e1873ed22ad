import type { Shell } from '../../src/commands/shell.js';

/** A shell whose files are texts in memory; what a command says is kept. */
export function memoryShell(
  files: Readonly<Record<string, string>>,
): Shell & { readonly errors: () => string; readonly output: () => string } {
  let output = '';
  let errors = '';
  return {
    out: (text) => {
      output += text;
    },
    err: (text) => {
      errors += text;
    },
    readText: (path) => (path in files ? { text: files[path] } : { problem: 'no such file' }),
    createText: () => null,
    replaceText: () => null,
    exists: (path) => path in files,
    isTerminal: { out: false, err: false },
    color: false,
    now: () => 0,
    interruption: new AbortController().signal,
    output: () => output,
    errors: () => errors,
  };
}
