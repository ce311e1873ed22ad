import { dirname, join } from 'node:path';
import type { Origin } from '../study/origin.js';
import { renderProblem } from '../study/problem.js';
import type { Overrides } from '../study/read-options.js';
import { type InputText, readStudy } from '../study/read-study.js';
import type { Study } from '../study/study.js';
import { measureChoices } from './measure-choices.js';
import type { Shell } from './shell.js';

/** A study as read from a file, with what a run keeps beside its results. */
export interface LoadedStudy {
  /** Path as given. */
  readonly file: string;
  /** Text of the study file as read. */
  readonly text: string;
  readonly study: Study;
  readonly origins: readonly Origin[];
  /** Sentences for people; the study runs all the same. */
  readonly warnings: readonly string[];
  /** Files named by the study, in order of their first mention. */
  readonly inputs: readonly InputText[];
}

/**
 * Reads a study file and the files it names; every problem goes to stderr, one per line.
 *
 * @param file path relative to the working directory
 * @returns null if there were problems: the command then ends with the status for input
 */
export function loadStudy(file: string, shell: Shell, overrides: Overrides = {}): LoadedStudy | null {
  const read = shell.readText(file);
  if ('problem' in read) {
    shell.err(`${file} cannot be read: ${read.problem}\n`);
    return null;
  }
  const result = readStudy(read.text, {
    fileName: file,
    readText: (path) => shell.readText(join(dirname(file), path)),
    measures: measureChoices(),
    overrides,
  });
  if (result.kind === 'refused') {
    for (const problem of result.problems) shell.err(`${renderProblem(problem)}\n`);
    const count = result.problems.length;
    shell.err(`${count} ${count === 1 ? 'problem' : 'problems'}; nothing was run\n`);
    return null;
  }
  return { file, text: read.text, ...result };
}
