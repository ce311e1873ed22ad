import { type BlockReply, type BlockTask, blockCount } from '../outcomes/block.js';
import type { Study } from '../study/study.js';
import { sha256 } from './checksum.js';
import type { JournalEntry } from './journal.js';
import { blockName } from './lost-block.js';
import { allBlocks } from './plan.js';
import { blockFile } from './run-folder.js';

/** A block that is in its place, with its text. */
export interface StoredBlock {
  readonly task: BlockTask;
  readonly csv: string;
}

/** What the blocks of a folder are like. */
export interface StoredBlocks {
  /** As the journal says, in the order of blocks. */
  readonly intact: readonly StoredBlock[];
  /** What is not as it was written; a sentence each. */
  readonly findings: readonly string[];
  /** Blocks of the run that the journal does not call finished. */
  readonly missing: number;
}

/**
 * Compares the blocks of a folder with its journal.
 *
 * @param instances with which the run is complete; there may be blocks beyond
 * @param read text of a file of the folder by its name; null if it cannot be read
 */
export function checkBlocks(
  study: Study,
  instances: number,
  entries: readonly JournalEntry[],
  read: (name: string) => string | null,
): StoredBlocks {
  const checksums = new Map(entries.map((entry) => [blockFile(entry), entry.sha256]));
  const intact: StoredBlock[] = [];
  const findings: string[] = [];
  const last = blockCount({ ...study, instances });
  let missing = 0;
  for (const task of allBlocks(study)) {
    const name = blockFile(task);
    const checksum = checksums.get(name);
    const csv = checksum === undefined ? null : read(name);
    if (checksum === undefined) missing += task.block <= last ? 1 : 0;
    else if (csv === null) findings.push(`${name} cannot be read`);
    else if (sha256(csv) === checksum) intact.push({ task, csv });
    else findings.push(`${name} is not as it was written`);
  }
  return { intact, findings, missing };
}

/** So many of the items, evenly spread over all of them; all if there are no more. */
export function spreadSample<Item>(items: readonly Item[], count: number): readonly Item[] {
  if (count >= items.length) return items;
  return Array.from({ length: count }, (_, index) => items[Math.floor(((index + 0.5) * items.length) / count)]).filter(
    (item) => item !== undefined,
  );
}

/**
 * The study that the blocks of a folder were computed for: a folder may hold more banks than its study asks for by now,
 * and its last block then more rows.
 */
export function studyOfBlocks(study: Study, entries: readonly JournalEntry[]): Study {
  const last = entries.map(({ block, instances }) => (block - 1) * study.blockSize + instances);
  return { ...study, instances: Math.max(study.instances, ...last) };
}

/** Compares a block with what was computed anew. @returns a sentence about the first difference, null if identical */
export function findDifference({ task, csv }: StoredBlock, reply: BlockReply): string | null {
  if ('fault' in reply) return `${blockName(task)} cannot be computed again: ${reply.fault.message}`;
  if (reply.csv === csv) return null;
  const [before, after] = [csv, reply.csv].map((text) => text.split('\r\n'));
  const line = before?.findIndex((text, index) => text !== after?.[index]) ?? -1;
  const names = before?.[0]?.split(',') ?? [];
  const [stored, anew] = [before, after].map((lines) => lines?.[line]?.split(',') ?? []);
  const column = names.findIndex((_, index) => stored?.[index] !== anew?.[index]);
  if (line < 1 || column < 1) return `${blockFile(task)} has other rows or columns when computed again`;
  return `${blockFile(task)}, instance ${stored?.[0]}: ${names[column]} is ${stored?.[column]}, and ${anew?.[column]} when computed again`;
}
