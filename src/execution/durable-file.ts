import { open, rename, rm } from 'node:fs/promises';
import { dirname } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { errorCode } from './system-error.js';

/** Ends the name of a file that is not finished; whatever carries it may be removed. */
export const UNFINISHED = '.tmp';

const RENAME_PAUSES_MS = [10, 30, 100, 300, 1000];

/**
 * Writes a file so that it is there whole or not at all, even if the machine stops: under a temporary name, flushed to
 * the disk, then renamed, and the new name flushed too.
 *
 * @throws the error of the system, for instance of a full disk; nothing is left behind then
 */
export async function writeDurably(path: string, text: string): Promise<void> {
  const unfinished = `${path}${UNFINISHED}`;
  try {
    await writeFlushed(unfinished, text);
    await renameInSpiteOfReaders(unfinished, path);
  } catch (error) {
    // On a full disk the half of a file would take the room of what can still be written.
    await rm(unfinished, { force: true }).catch(() => undefined);
    throw error;
  }
  await flushFolder(dirname(path));
}

async function writeFlushed(path: string, text: string): Promise<void> {
  const file = await open(path, 'w');
  try {
    await file.writeFile(text);
    await file.sync();
  } finally {
    await file.close();
  }
}

/** Makes names in a folder last. Windows does not open folders; its file system keeps names by itself. */
export async function flushFolder(path: string): Promise<void> {
  if (process.platform === 'win32') return;
  const folder = await open(path, 'r');
  try {
    await folder.sync();
  } finally {
    await folder.close();
  }
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
