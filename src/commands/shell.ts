import type { ReadText } from '../study/read-text.js';

/**
 * Everything a command may touch outside itself, so that commands can be tested in memory.
 * Only `src/cli.ts` makes a real one from the process.
 */
export interface Shell {
  /** Results only. The text is written as it is: line ends are the caller's. */
  readonly out: (text: string) => void;
  /** Progress, notes and faults. */
  readonly err: (text: string) => void;
  /** Reads a UTF-8 file; paths relative to the working directory. */
  readonly readText: ReadText;
  /** Writes a UTF-8 file that does not exist yet. @returns null, or in plain words why it was not written */
  readonly createText: (path: string, text: string) => string | null;
  /** Writes a UTF-8 file, in place of one that may be there. @returns null, or why it was not written */
  readonly replaceText: (path: string, text: string) => string | null;
  readonly exists: (path: string) => boolean;
  readonly isTerminal: { readonly out: boolean; readonly err: boolean };
  /** Colour is wanted on stdout: a terminal, no `NO_COLOR`, no `--no-color`. */
  readonly color: boolean;
  /** Milliseconds of a clock that never goes back. */
  readonly now: () => number;
  /**
   * From the first call on SIGINT, SIGTERM and SIGHUP end the process no more: they abort the signal returned, the name
   * being its reason. A second one ends the process at once. Only for commands that heed it.
   */
  readonly interruption: () => AbortSignal;
}
