import { isSystemError } from './system-error.js';

/** What a run holds or has kept is no longer there: somebody removed it, or moved the folder, while the run went on. */
export class FolderLost extends Error {
  override readonly name = 'FolderLost';
}

/** Whether a failure is the machine's, such as a full disk, or of somebody who took the folder away: no fault of ours. */
export function isOfTheMachine(error: unknown): error is Error {
  return error instanceof FolderLost || isSystemError(error);
}
