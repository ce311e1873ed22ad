/** The folder holds something that a run must not touch; the message says what, and is meant for the user. */
export class FolderRefused extends Error {
  override readonly name = 'FolderRefused';
}
