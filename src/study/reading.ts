import type { Origin } from './origin.js';
import type { Problem } from './problem.js';
import type { ReadText } from './read-text.js';
import { showValue } from './show-value.js';
import { isWithin, renderPath, type StudyPath, valueAt } from './study-path.js';
import type { YamlSource } from './yaml-source.js';

/** A file that the study names, as read. */
export interface InputText {
  /** Path as written in the study. */
  readonly path: string;
  readonly text: string;
}

/** What comes up while one study file is read: problems, origins, warnings and the texts of the files it names. */
export class Reading {
  readonly problems: Problem[] = [];
  readonly origins: Origin[] = [];
  readonly warnings: string[] = [];
  readonly inputs: InputText[] = [];
  readonly #unreadable = new Set<string>();

  constructor(
    readonly fileName: string,
    private readonly source: YamlSource,
    private readonly readText: ReadText,
    private readonly setAside: readonly StudyPath[],
  ) {}

  /** Records that the value at a path breaks a rule: `<path> must be <rule>, got <value>`. */
  fault(path: StudyPath, rule: string, hint = ''): void {
    this.faultWith(path, `must be ${rule}, got ${showValue(this.written(path))}${hint}`);
  }

  /** Records a fault in words of its own. Silent where a part at fault already was set aside: that would be an echo. */
  faultWith(path: StudyPath, message: string): void {
    if (this.setAside.some((part) => isWithin(part, path) || isWithin(path, part))) return;
    const problem = { file: this.fileName, ...this.source.placeOf(path), path: renderPath(path), message };
    const known = this.problems.some(
      (p) => p.file === problem.file && p.path === problem.path && p.message === message,
    );
    if (!known) this.problems.push(problem);
  }

  /** @returns what the file holds at a path, parts that break the schema included */
  written(path: StudyPath): unknown {
    return valueAt(this.source.data, path);
  }

  /** @returns true if something within the path was set aside, so that what it names is not known in full */
  isIncomplete(path: StudyPath): boolean {
    return this.setAside.some((part) => isWithin(part, path) || isWithin(path, part));
  }

  /** @returns the text of a file that the study names at `path`, or undefined after recording the fault */
  textOf(path: StudyPath, file: string): string | undefined {
    const known = this.inputs.find((input) => input.path === file);
    if (known) return known.text;
    if (this.#unreadable.has(file)) return undefined;
    const read = this.readText(file);
    if ('problem' in read) {
      this.#unreadable.add(file);
      this.fault(path, 'a readable file, relative to the study', ` (${read.problem})`);
      return undefined;
    }
    this.inputs.push({ path: file, text: read.text });
    return read.text;
  }

  /** Records the problems of a file that the study names, once if several parts of the study read it. */
  addTableProblems(problems: readonly Problem[]): void {
    for (const problem of problems) {
      const isKnown = this.problems.some(
        ({ file, line, column, message }) =>
          file === problem.file && line === problem.line && column === problem.column && message === problem.message,
      );
      if (!isKnown) this.problems.push(problem);
    }
  }
}
