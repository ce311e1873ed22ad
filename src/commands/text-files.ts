import { existsSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { makeFolder } from '../execution/make-folder.js';
import type { TextOrProblem } from '../study/read-text.js';

/** Room for the longest table that is read, four bytes a character. */
const LARGEST_MB = 80;

const REASONS: Readonly<Record<string, string>> = {
  ENOENT: 'no such file',
  EISDIR: 'it is a folder',
  EACCES: 'no permission',
  EPERM: 'no permission',
  EEXIST: 'it is there already',
  ENOTDIR: 'a part of its path is a file',
  ENOSPC: 'no space is left',
  ELOOP: 'its symbolic links lead in a circle',
  ENAMETOOLONG: 'its name is too long',
};

/** Where a folder is to be made, two codes mean something else than for a file. */
const FOLDER_REASONS: Readonly<Record<string, string>> = {
  ENOENT: 'no folder can be made there',
  EEXIST: 'a part of its path is a file',
};

export function reasonOf(error: unknown): string {
  const { code = '', syscall = '' }: Partial<NodeJS.ErrnoException> = error instanceof Error ? error : {};
  const reason = syscall === 'mkdir' ? (FOLDER_REASONS[code] ?? REASONS[code]) : REASONS[code];
  return reason ?? (error instanceof Error ? error.message : String(error));
}

/**
 * Reads a UTF-8 file, with or without a byte order mark. Symbolic links are followed; a pipe or a device, which might
 * never end, is no file.
 */
export function readText(path: string): TextOrProblem {
  try {
    const spelling = spellingOf(path);
    const found = statSync(spelling);
    if (found.isDirectory()) return { problem: 'it is a folder' };
    if (!found.isFile()) return { problem: 'it is a pipe or a device' };
    if (found.size > LARGEST_MB * 1e6) return { problem: `it is larger than ${LARGEST_MB} MB` };
    return { text: new TextDecoder('utf-8', { fatal: true }).decode(readFileSync(spelling)) };
  } catch (error) {
    if (error instanceof TypeError) return { problem: 'it is no UTF-8 text' };
    return { problem: reasonOf(error) };
  }
}

/** Some systems compose accents with their letters in names and some do not, so a copied file may be spelt either way. */
function spellingOf(path: string): string {
  return [path, path.normalize('NFC'), path.normalize('NFD')].find((spelling) => existsSync(spelling)) ?? path;
}

/** @returns null, or in plain words why the file was not written */
export function writeText(path: string, text: string, flag: 'wx' | 'w'): string | null {
  try {
    makeFolder(dirname(path));
    writeFileSync(path, text, { flag });
    return null;
  } catch (error) {
    return reasonOf(error);
  }
}
