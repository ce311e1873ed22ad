import { existsSync, mkdirSync, statSync } from 'node:fs';
import { dirname } from 'node:path';

/**
 * Makes a folder and those above it that are missing; one that is there is left as it is.
 *
 * Goes level by level, because the recursive form of Node tries for ever where the system answers "no such file" below a
 * folder that is there, as Linux does in `/proc`.
 *
 * @throws the error of the system if a folder cannot be made, or something else has its name
 */
export function makeFolder(path: string): void {
  const parent = dirname(path);
  if (!existsSync(path) && parent !== path && !existsSync(parent)) makeFolder(parent);
  try {
    mkdirSync(path);
  } catch (error) {
    // It may have been there before, or another process may have been quicker.
    if (!statSync(path, { throwIfNoEntry: false })?.isDirectory()) throw error;
  }
}
