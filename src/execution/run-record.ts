import { hostname } from 'node:os';
import { sha256 } from './checksum.js';
import { DESCRIPTION, RUN_FILE, type RunFolder } from './run-folder.js';

/** How a session of a run ended; null while it goes on, and for ever if the machine stopped under it. */
export type SessionEnd = 'complete' | 'interrupted' | 'blocks missing' | 'failed' | null;

/** One call of `run` on a folder. */
export interface Session {
  readonly host: string;
  readonly system: string;
  readonly node: string;
  readonly threads: number;
  /** ISO 8601, UTC. */
  readonly started: string;
  readonly duration_s: number | null;
  readonly ended: SessionEnd;
  /** Checksum of the description of the results that it left, hexadecimal; null if it left none. */
  readonly results: string | null;
}

/** Who computed what, where and when: beside the result, not part of it. */
export class RunRecord {
  readonly #folder: RunFolder;
  readonly #earlier: readonly Session[];
  readonly #session: Session;

  private constructor(folder: RunFolder, earlier: readonly Session[], session: Session) {
    this.#folder = folder;
    this.#earlier = earlier;
    this.#session = session;
  }

  /** Begins a session after those that the folder tells of. */
  static async begin(folder: RunFolder, threads: number, started: Date): Promise<RunRecord> {
    const record = new RunRecord(folder, readSessions(await folder.read(RUN_FILE.record)), {
      host: hostname(),
      system: `${process.platform} ${process.arch}`,
      node: process.version,
      threads,
      started: started.toISOString(),
      duration_s: null,
      ended: null,
      results: null,
    });
    await record.#write(record.#session);
    return record;
  }

  /** @param hasResults whether this session has written the results of the run */
  async end(ended: SessionEnd, durationS: number, hasResults: boolean): Promise<void> {
    const description = hasResults ? await this.#folder.read(DESCRIPTION) : undefined;
    const results = description === undefined ? null : sha256(description);
    await this.#write({ ...this.#session, duration_s: Number(durationS.toFixed(3)), ended, results });
  }

  async #write(session: Session): Promise<void> {
    const sessions = [...this.#earlier, session];
    const interruptions = this.#earlier.filter(({ ended }) => ended !== 'complete').length;
    await this.#folder.write(RUN_FILE.record, `${JSON.stringify({ interruptions, sessions }, null, 2)}\n`);
  }
}

/** A record that cannot be read is begun anew: nothing depends on it. */
export function readSessions(text: string | undefined): Session[] {
  try {
    const record: { readonly sessions?: unknown } | null = JSON.parse(text ?? 'null');
    return Array.isArray(record?.sessions) ? record.sessions : [];
  } catch {
    return [];
  }
}
