import { studyJsonSchema } from '../study/study-file.js';
import { EXIT_STATUS, type ExitStatus } from './exit-status.js';
import type { Shell } from './shell.js';

/** What `schema` is told on the command line. */
export interface SchemaOptions {
  /** File to write it to, in place of stdout. */
  readonly out?: string | undefined;
}

/** Prints or writes the JSON Schema of study files. */
export function schemaCommand({ out }: SchemaOptions, shell: Shell): ExitStatus {
  const text = `${JSON.stringify(studyJsonSchema(), null, 2)}\n`;
  if (out === undefined) {
    shell.out(text);
    return EXIT_STATUS.done;
  }
  const problem = shell.replaceText(out, text);
  if (problem === null) return EXIT_STATUS.done;
  shell.err(`${out} cannot be written: ${problem}\n`);
  return EXIT_STATUS.input;
}
