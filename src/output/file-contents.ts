import { createHash } from 'node:crypto';

/** What is in a file of the data package. */
export interface FileContents {
  /** Within the package, with `/`. */
  readonly path: string;
  readonly bytes: number;
  /** `sha256:` and the digest in hexadecimal. */
  readonly hash: string;
}

/** What is in files of one kind: in each, and in all of them one after the other. */
export interface JoinedContents {
  readonly parts: readonly FileContents[];
  readonly bytes: number;
  readonly hash: string;
}

/** @param text of the file, which is in UTF-8 */
export function contentsOf(path: string, text: string): FileContents {
  return { path, bytes: Buffer.byteLength(text), hash: `sha256:${createHash('sha256').update(text).digest('hex')}` };
}

/**
 * Reads files one after the other, so that no more than one is in memory.
 *
 * @param read gives the text of a file
 */
export async function joinedContents(
  paths: readonly string[],
  read: (path: string) => Promise<string>,
): Promise<JoinedContents> {
  const whole = createHash('sha256');
  const parts: FileContents[] = [];
  for (const path of paths) {
    const text = await read(path);
    whole.update(text);
    parts.push(contentsOf(path, text));
  }
  const bytes = parts.reduce((sum, part) => sum + part.bytes, 0);
  return { parts, bytes, hash: `sha256:${whole.digest('hex')}` };
}
