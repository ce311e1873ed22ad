import { existsSync, readFileSync } from 'node:fs';
import { type MemoryShell, memoryShell } from './memory-shell.js';

/** A shell that reads the real file system; everything else is in memory. */
export function diskShell(): MemoryShell {
  return {
    ...memoryShell(),
    readText: (path) => (existsSync(path) ? { text: readFileSync(path, 'utf8') } : { problem: 'no such file' }),
    exists: existsSync,
    now: () => performance.now(),
  };
}
