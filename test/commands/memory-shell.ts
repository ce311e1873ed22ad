import type { Shell } from '../../src/commands/shell.js';

/** A shell in memory: files by path, what was printed, a clock that stands still unless it is moved. */
export interface MemoryShell extends Shell {
  readonly files: Map<string, string>;
  readonly printed: { out: string; err: string };
}

export function memoryShell(files: Readonly<Record<string, string>> = {}): MemoryShell {
  const held = new Map(Object.entries(files));
  const printed = { out: '', err: '' };
  return {
    files: held,
    printed,
    out: (text) => {
      printed.out += text;
    },
    err: (text) => {
      printed.err += text;
    },
    readText: (path) => {
      const text = held.get(path);
      return text === undefined ? { problem: 'no such file' } : { text };
    },
    createText: (path, text) => {
      if (held.has(path)) return 'it is there already';
      held.set(path, text);
      return null;
    },
    replaceText: (path, text) => {
      held.set(path, text);
      return null;
    },
    exists: (path) => held.has(path),
    isTerminal: { out: false, err: false },
    color: false,
    now: () => 0,
    interruption: () => new AbortController().signal,
  };
}
