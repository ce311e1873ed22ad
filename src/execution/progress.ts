export interface ProgressOptions {
  readonly write: (text: string) => void;
  /** A terminal gets one line that is written over, anything else a line a minute. */
  readonly terminal: boolean;
  /** Milliseconds on a clock that never goes back. */
  readonly nowMs: () => number;
}

const QUIET_MS = 60_000;
const REDRAW_MS = 200;
const CLEAR_LINE = '\r\u001b[K';

/** Says how far a run has come and about how long it still takes. */
export class Progress {
  readonly #write: (text: string) => void;
  readonly #terminal: boolean;
  readonly #nowMs: () => number;
  readonly #startMs: number;
  #shownMs: number;
  #line = '';

  constructor({ write, terminal, nowMs }: ProgressOptions) {
    this.#write = write;
    this.#terminal = terminal;
    this.#nowMs = nowMs;
    this.#startMs = nowMs();
    // A terminal shows at once that something goes on; a log is told after a minute.
    this.#shownMs = terminal ? Number.NEGATIVE_INFINITY : this.#startMs;
  }

  /**
   * @param done blocks computed by this session
   * @param total blocks that this session has to compute
   */
  update(done: number, total: number): void {
    const nowMs = this.#nowMs();
    if (nowMs - this.#shownMs < (this.#terminal ? REDRAW_MS : QUIET_MS)) return;
    this.#shownMs = nowMs;
    const spentMs = nowMs - this.#startMs;
    const left = done === 0 ? '' : `, about ${clock((spentMs / done) * (total - done))} left`;
    const line = `${done} of ${total} blocks in ${clock(spentMs)}${left}`;
    if (!this.#terminal) {
      this.#write(`${line}\n`);
      return;
    }
    this.#line = line;
    this.#write(`${CLEAR_LINE}${line}`);
  }

  /** A line that stays. */
  note(text: string): void {
    this.#write(this.#line === '' ? `${text}\n` : `${CLEAR_LINE}${text}\n${this.#line}`);
  }

  /** Takes the rewritten line away. */
  end(): void {
    if (this.#line !== '') this.#write(CLEAR_LINE);
    this.#line = '';
  }
}

/** Minutes and seconds, with hours if there are any: 0:07, 12:30, 1:02:05. */
export function clock(durationMs: number): string {
  const seconds = Math.round(durationMs / 1000);
  const two = (value: number) => String(value).padStart(2, '0');
  const hours = Math.floor(seconds / 3600);
  const minutes = Math.floor(seconds / 60) % 60;
  const tail = two(seconds % 60);
  return hours === 0 ? `${minutes}:${tail}` : `${hours}:${two(minutes)}:${tail}`;
}
