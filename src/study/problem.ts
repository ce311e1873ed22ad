/** A fault of the study's author: where it stands and which rule it breaks. Never thrown, always returned. */
export interface Problem {
  /** File as named on the command line or in the study. */
  readonly file: string;
  /** From 1; null where the fault belongs to the file as a whole. */
  readonly line: number | null;
  /** From 1, in characters; null with `line`. */
  readonly column: number | null;
  /** Study path (`stock.newer.capacity_Ah`), or a column of a table; empty for the file as a whole. */
  readonly path: string;
  /** `must be <rule>, got <value>`. */
  readonly message: string;
}

/** @returns the one-line text of a fault: `file:line:column path must be <rule>, got <value>` */
export function renderProblem(problem: Problem): string {
  const { file, line, column, path, message } = problem;
  const place = line === null ? file : `${file}:${line}:${column ?? 1}`;
  const text = path === '' ? `${place} ${message}` : `${place} ${path} ${message}`;
  // A key of the file may hold anything, also what would move a terminal's cursor.
  return text.replace(/\p{Cc}/gu, '?');
}
