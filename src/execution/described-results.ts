import { sha256 } from './checksum.js';
import { DESCRIPTION } from './run-folder.js';
import type { Session } from './run-record.js';

/** What the description tells of a run. */
export interface DescribedResults {
  /** Sampled banks that the results are of. */
  readonly instances: number;
  /** Names within the folder, and checksums as they are written there. */
  readonly files: readonly { readonly path: string; readonly hash: string }[];
}

/** @returns null if the text is not the description of a run */
export function readDescribedResults(text: string): DescribedResults | null {
  try {
    const { motleybank, resources } = JSON.parse(text);
    const files = resources.flatMap((resource: { readonly parts?: unknown }) => resource.parts ?? resource);
    const isFile = ({ path, hash }: { readonly path?: unknown; readonly hash?: unknown }) =>
      typeof path === 'string' && typeof hash === 'string';
    return Number.isInteger(motleybank.instances) && files.every(isFile)
      ? { instances: motleybank.instances, files }
      : null;
  } catch {
    return null;
  }
}

/**
 * Compares the files of a folder with the description of its results.
 *
 * @param session the latest of the folder, null if its record is lost
 * @param known checksums, hexadecimal, by name of files that are compared elsewhere
 * @param read text of a file of the folder by its name; null if it cannot be read
 * @returns a sentence for all that differs; null if the latest session has left no results, which may be older then
 */
export function checkDescribedResults(
  session: Session | null,
  known: ReadonlyMap<string, string>,
  read: (name: string) => string | null,
): readonly string[] | null {
  const text = read(DESCRIPTION);
  const written = session?.results ?? null;
  const isDue = session === null ? text !== null : written !== null || session.ended === 'complete';
  if (!isDue) return null;
  if (text === null) return [`${DESCRIPTION} cannot be read, so that the results cannot be compared`];
  const described = readDescribedResults(text);
  const isOther = described === null || (written !== null && sha256(text) !== written);
  const findings = isOther ? [`${DESCRIPTION} is not as it was written`] : [];
  for (const { path, hash } of described?.files ?? []) {
    const checksum = known.get(path) ?? checksumOf(read(path));
    if (checksum === null) findings.push(`${path} cannot be read`);
    else if (hash !== `sha256:${checksum}`) findings.push(`${path} is not as ${DESCRIPTION} says`);
  }
  return findings;
}

function checksumOf(text: string | null): string | null {
  return text === null ? null : sha256(text);
}
