import { open, rename } from 'node:fs/promises';
import { setTimeout as pause } from 'node:timers/promises';
import { errorCode } from './system-error.js';

/** Ends the name of a file that is not finished; whatever carries it may be removed. */
export const UNFINISHED = '.tmp';

const RENAME_PAUSES_MS = [10, 30, 100, 300, 1000];

/**
 * Writes a file so that it is there whole or not at all, even if the machine stops: under a temporary name, flushed to
 * the disk, then renamed.
 */
export async function writeDurably(path: string, text: string): Promise<void> {
  const unfinished = `${path}${UNFINISHED}`;
  const file = await open(unfinished, 'w');
  try {
    await file.writeFile(text);
    await file.sync();
  } finally {
    await file.close();
  }
  await renameInSpiteOfReaders(unfinished, path);
}

/** On Windows a virus scanner or a viewer may hold the file for a moment; then waiting helps. */
async function renameInSpiteOfReaders(from: string, to: string): Promise<void> {
  for (const pauseMs of RENAME_PAUSES_MS) {
    try {
      await rename(from, to);
      return;
    } catch (error) {
      if (!isHeldOpen(error)) throw error;
      await pause(pauseMs);
    }
  }
  await rename(from, to);
}

function isHeldOpen(error: unknown): boolean {
  const code = errorCode(error);
  return code === 'EPERM' || code === 'EBUSY' || code === 'EACCES';
}
