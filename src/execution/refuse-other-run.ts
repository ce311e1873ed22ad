import type { Candidate, Study } from '../study/study.js';
import { type Difference, firstDifference } from './first-difference.js';
import { FolderRefused } from './folder-refused.js';
import { RUN_FILE, type RunFolder } from './run-folder.js';

const SHOWN_CHARACTERS = 60;

/** All that fixes the outcomes of a candidate, as plain data. */
export type ContentOf = (study: Study, candidate: Candidate) => unknown;

/**
 * Makes sure that what a folder holds of the candidates of a study is of this study. A candidate that is new to the
 * folder, or no longer asked for, is no obstacle.
 *
 * @param keys simulation key of every candidate
 * @throws FolderRefused that names the first difference by its path
 */
export async function refuseOtherRun(
  study: Study,
  keys: ReadonlyMap<string, string>,
  contentOf: ContentOf,
  folder: RunFolder,
): Promise<void> {
  const isOther = (candidate: Candidate) =>
    folder.journal.contents.entries.some(
      (entry) => entry.candidate === candidate.key && entry.key !== keys.get(candidate.key),
    );
  const other = study.candidates.find(isOther);
  if (other === undefined) return;
  const difference = differenceFrom(await folder.read(RUN_FILE.resolved), study, other, contentOf);
  const what = difference
    ? `${difference.path} is ${shown(difference.before)} there and ${shown(difference.after)} here`
    : `its outcomes of ${other.key} are of another study or engine`;
  throw new FolderRefused(
    `${folder.path} holds another run: ${what}; --replace discards it, --out names another folder`,
  );
}

/** @returns undefined also if the study in the folder is lost, spoilt or of another engine's shape */
function differenceFrom(
  resolved: string | undefined,
  study: Study,
  candidate: Candidate,
  contentOf: ContentOf,
): Difference | undefined {
  try {
    const earlier: Study = JSON.parse(resolved ?? '');
    const counterpart = earlier.candidates.find(({ key }) => key === candidate.key);
    return counterpart && firstDifference(contentOf(earlier, counterpart), contentOf(study, candidate));
  } catch {
    return undefined;
  }
}

function shown(value: unknown): string {
  const text = JSON.stringify(value) ?? 'absent';
  return text.length <= SHOWN_CHARACTERS ? text : `${text.slice(0, SHOWN_CHARACTERS)}...`;
}
