/** What reading a file gives: its text, or in plain words why there is none (`no such file`). */
export type TextOrProblem = { readonly text: string } | { readonly problem: string };

/** Injected reader of files; the path is given as written by whoever names the file. */
export type ReadText = (path: string) => TextOrProblem;
