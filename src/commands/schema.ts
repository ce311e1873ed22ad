import { renderStudyKeys } from '../output/study-keys.js';
import { studyJsonSchema } from '../study/study-file.js';
import { EXIT_STATUS, type ExitStatus } from './exit-status.js';
import type { Shell } from './shell.js';

/** What `schema` is told on the command line. */
export interface SchemaOptions {
  /** The keys as Markdown tables, in place of the JSON Schema. */
  readonly keys?: boolean | undefined;
  /** File to write it to, in place of stdout. */
  readonly out?: string | undefined;
}

/** Prints or writes the JSON Schema of study files, or their keys for people. */
export function schemaCommand({ keys, out }: SchemaOptions, shell: Shell): ExitStatus {
  const schema = studyJsonSchema();
  const text = keys === true ? renderStudyKeys(schema) : `${JSON.stringify(schema, null, 2)}\n`;
  if (out === undefined) {
    shell.out(text);
    return EXIT_STATUS.done;
  }
  const problem = shell.replaceText(out, text);
  if (problem === null) return EXIT_STATUS.done;
  shell.err(`${out} cannot be written: ${problem}\n`);
  return EXIT_STATUS.input;
}
