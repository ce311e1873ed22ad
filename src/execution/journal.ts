import { type FileHandle, open } from 'node:fs/promises';
import { dirname } from 'node:path';
import type { FailedInstance } from '../outcomes/block.js';
import { sha256 } from './checksum.js';
import { flushFolder } from './durable-file.js';

/** One finished block. */
export interface JournalEntry {
  readonly candidate: string;
  /** 0 for the twin. */
  readonly block: number;
  /** Simulation key that the block belongs to. */
  readonly key: string;
  /** Instances that the block stands for. */
  readonly instances: number;
  /** Of the block file, hexadecimal. */
  readonly sha256: string;
  /** Time of one thread, s. */
  readonly compute_s: number;
  /** Instances without an outcome; absent if there are none. */
  readonly failed?: readonly FailedInstance[];
}

/** The resolved study that the folder is left with. */
interface StudyEntry {
  /** Checksum of `study.resolved.json`, hexadecimal. */
  readonly study: string;
}

/** What a journal tells. */
export interface JournalContents {
  /** Latest entry of every block. */
  readonly entries: readonly JournalEntry[];
  /** Checksum of the resolved study, null if the journal has none. */
  readonly study: string | null;
  /** Lines, from 1, that are not as they were written; each stands for a block to be computed. */
  readonly damagedLines: readonly number[];
}

/** Hexadecimal digits of a line's own checksum: damage by chance passes once in 2^64. */
const CHECK_DIGITS = 16;

/**
 * Record of finished blocks, one JSON line each, in the order in which they were finished. A block counts only once its
 * line is on the disk, and its file is there before the line. Every line ends with a checksum of its own.
 */
export class Journal {
  readonly #file: FileHandle;
  /** As it was when the journal was opened. */
  readonly contents: JournalContents;
  /** Appends one after the other: two at once could interleave. After one that failed none is made. */
  #last: Promise<void> = Promise.resolve();

  private constructor(file: FileHandle, contents: JournalContents) {
    this.#file = file;
    this.contents = contents;
  }

  /** Opens a journal, a new one if there is none; a line cut off by a sudden end is removed. */
  static async open(path: string): Promise<Journal> {
    const file = await open(path, 'a+');
    try {
      await flushFolder(dirname(path));
      const bytes = await file.readFile();
      const whole = bytes.lastIndexOf('\n') + 1;
      if (whole < bytes.length) await file.truncate(whole);
      return new Journal(file, readJournal(bytes.toString('utf8', 0, whole)));
    } catch (error) {
      await file.close();
      throw error;
    }
  }

  append(entry: JournalEntry | StudyEntry): Promise<void> {
    this.#last = this.#last.then(async () => {
      await this.#file.appendFile(journalLine(entry));
      await this.#file.datasync();
    });
    return this.#last;
  }

  async close(): Promise<void> {
    await this.#file.close();
  }
}

/** An entry as a line with its checksum. */
export function journalLine(entry: JournalEntry | StudyEntry): string {
  const text = JSON.stringify(entry);
  return `${text.slice(0, -1)},"check":"${checkOf(text)}"}\n`;
}

/** Reads a journal, later lines over earlier ones. A last line without an end is still being written and left out. */
export function readJournal(text: string): JournalContents {
  const latest = new Map<string, JournalEntry>();
  const damagedLines: number[] = [];
  let study: string | null = null;
  for (const [index, line] of text.split('\n').slice(0, -1).entries()) {
    const entry = readLine(line);
    if (entry === undefined) damagedLines.push(index + 1);
    else if ('study' in entry) study = entry.study;
    else latest.set(`${entry.candidate}/${entry.block}`, entry);
  }
  return { entries: [...latest.values()], study, damagedLines };
}

/** @returns undefined if the line is not as `journalLine` made it */
function readLine(line: string): JournalEntry | StudyEntry | undefined {
  const [, body, check] = /^(\{.*),"check":"([0-9a-f]+)"\}$/.exec(line) ?? [];
  const text = `${body}}`;
  // What has the checksum of a line was written as a line: it need not be looked at any closer.
  return check === checkOf(text) ? JSON.parse(text) : undefined;
}

function checkOf(text: string): string {
  return sha256(text).slice(0, CHECK_DIGITS);
}
