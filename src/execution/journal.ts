import { type FileHandle, open } from 'node:fs/promises';

/** One finished block. */
export interface JournalEntry {
  readonly candidate: string;
  /** 0 for the twin. */
  readonly block: number;
  /** Simulation key that the block belongs to. */
  readonly key: string;
  /** Rows in the block. */
  readonly instances: number;
  /** Of the block file, hexadecimal. */
  readonly sha256: string;
  /** Time of one thread, s. */
  readonly compute_s: number;
}

/**
 * Record of finished blocks, one JSON line each, in the order in which they were finished. A block counts only once its
 * line is on the disk, and its file is there before the line.
 */
export class Journal {
  readonly #file: FileHandle;
  /** Latest entry of every block found when the journal was opened. */
  readonly entries: readonly JournalEntry[];
  /** Appends one after the other: two at once could interleave. */
  #last: Promise<void> = Promise.resolve();

  private constructor(file: FileHandle, entries: readonly JournalEntry[]) {
    this.#file = file;
    this.entries = entries;
  }

  /** Opens a journal, a new one if there is none; a line cut off by a sudden end is removed. */
  static async open(path: string): Promise<Journal> {
    const file = await open(path, 'a+');
    try {
      const bytes = await file.readFile();
      const whole = bytes.lastIndexOf('\n') + 1;
      if (whole < bytes.length) await file.truncate(whole);
      return new Journal(file, readEntries(bytes.toString('utf8', 0, whole)));
    } catch (error) {
      await file.close();
      throw error;
    }
  }

  append(entry: JournalEntry): Promise<void> {
    this.#last = this.#last.then(async () => {
      await this.#file.appendFile(`${JSON.stringify(entry)}\n`);
      await this.#file.datasync();
    });
    return this.#last;
  }

  async close(): Promise<void> {
    await this.#file.close();
  }
}

/** Entries of a journal, later lines over earlier ones; a line that cannot be read stands for a block to be computed. */
export function readEntries(text: string): JournalEntry[] {
  const latest = new Map<string, JournalEntry>();
  for (const line of text.split('\n')) {
    const entry = readEntry(line);
    if (entry !== undefined) latest.set(`${entry.candidate}/${entry.block}`, entry);
  }
  return [...latest.values()];
}

function readEntry(line: string): JournalEntry | undefined {
  let value: unknown;
  try {
    value = JSON.parse(line);
  } catch {
    return undefined;
  }
  return isEntry(value) ? value : undefined;
}

function isEntry(value: unknown): value is JournalEntry {
  if (typeof value !== 'object' || value === null) return false;
  const entry: Partial<Record<keyof JournalEntry, unknown>> = value;
  return (
    typeof entry.candidate === 'string' &&
    Number.isInteger(entry.block) &&
    typeof entry.key === 'string' &&
    Number.isInteger(entry.instances) &&
    typeof entry.sha256 === 'string' &&
    typeof entry.compute_s === 'number'
  );
}
