import { mkdirSync } from 'node:fs';
import { join } from 'node:path';

/** Longest path of a file on Linux, with its end mark. */
const PATH_MAX = 4096;
/** Less than any name that a run gives to a file of its own takes. */
const SPARE = 8;

/**
 * Makes an empty folder, below `top`, in which nobody can make a file of a run, not even root, whom permissions do not
 * bind: its path leaves no room for a name.
 */
export function unwritableFolder(top: string): string {
  let path = top;
  for (;;) {
    const left = PATH_MAX - SPARE - path.length - 1;
    if (left < 1) break;
    // Never so that a single character is left, which would be a separator alone.
    path = join(path, 'x'.repeat(left > 202 ? 200 : left));
  }
  mkdirSync(path, { recursive: true });
  return path;
}
