import { appendFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { makeFolder } from './make-folder.js';

/** What a line of a log tells, beside its time. */
export type LogEvent =
  | { readonly event: 'started'; readonly [key: string]: unknown }
  | { readonly event: 'progress'; readonly [key: string]: unknown }
  | { readonly event: 'note'; readonly text: string }
  | { readonly event: 'ended'; readonly [key: string]: unknown };

/** A log for machines: a JSON object per line, each with the time (ISO 8601, UTC) and what happened. */
export class RunLog {
  readonly #path: string | undefined;
  readonly #onFailure: (reason: string) => void;
  #failed = false;

  /**
   * @param path file that is appended to; without one nothing is written
   * @param onFailure told once if the file cannot be written later on: a run is worth more than its log
   */
  constructor(path: string | undefined, onFailure: (reason: string) => void) {
    this.#path = path;
    this.#onFailure = onFailure;
  }

  /** @throws the error of the system if the file cannot be written */
  open(): void {
    if (this.#path === undefined) return;
    makeFolder(dirname(this.#path));
    appendFileSync(this.#path, '');
  }

  write(event: LogEvent): void {
    if (this.#path === undefined || this.#failed) return;
    try {
      appendFileSync(this.#path, `${JSON.stringify({ time: new Date().toISOString(), ...event })}\n`);
    } catch (error) {
      this.#failed = true;
      this.#onFailure(error instanceof Error ? error.message : String(error));
    }
  }
}
