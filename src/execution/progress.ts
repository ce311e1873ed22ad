export interface ProgressOptions {
  readonly write: (text: string) => void;
  /** A terminal gets one line that is written over, anything else a line a minute. */
  readonly terminal: boolean;
  /** Milliseconds on a clock that never goes back. */
  readonly nowMs: () => number;
  /** Told of every note, whether the screen shows it or not. */
  readonly onNote?: ((text: string) => void) | undefined;
}

const QUIET_MS = 60_000;
const REDRAW_MS = 200;
const CLEAR_LINE = '\r\u001b[K';

/** Says how far a run has come and about how long it still takes. */
export class Progress {
  readonly #write: (text: string) => void;
  readonly #terminal: boolean;
  readonly #nowMs: () => number;
  readonly #onNote: ProgressOptions['onNote'];
  readonly #startMs: number;
  #shownMs: number;
  #line = '';
  #done = 0;
  #total = 0;

  constructor({ write, terminal, nowMs, onNote }: ProgressOptions) {
    this.#onNote = onNote;
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
    this.#done = done;
    this.#total = total;
    this.tick();
  }

  /** How far the session is; `leftMs` is null before its first block. */
  get state(): {
    readonly done: number;
    readonly total: number;
    readonly elapsedMs: number;
    readonly leftMs: number | null;
  } {
    const [done, total] = [this.#done, this.#total];
    const elapsedMs = this.#nowMs() - this.#startMs;
    return { done, total, elapsedMs, leftMs: done === 0 ? null : (elapsedMs / done) * (total - done) };
  }

  /** Shows that time goes on, if nothing was shown for long enough. */
  tick(): void {
    const nowMs = this.#nowMs();
    if (nowMs - this.#shownMs < (this.#terminal ? REDRAW_MS : QUIET_MS)) return;
    this.#shownMs = nowMs;
    const line = progressLine(this.state);
    if (!this.#terminal) {
      this.#write(`${line}\n`);
      return;
    }
    this.#line = line;
    this.#write(`${CLEAR_LINE}${line}`);
  }

  /** Something that happened: a line that stays. */
  note(text: string): void {
    this.line(text);
    this.#onNote?.(text);
  }

  /** A line that stays. */
  line(text: string): void {
    this.#write(this.#line === '' ? `${text}\n` : `${CLEAR_LINE}${text}\n${this.#line}`);
  }

  /** Takes the rewritten line away. */
  end(): void {
    if (this.#line !== '') this.#write(CLEAR_LINE);
    this.#line = '';
  }
}

function progressLine({ done, total, elapsedMs, leftMs }: Progress['state']): string {
  const how = `${done} of ${total} blocks in ${clock(elapsedMs)}`;
  if (leftMs === null) return how;
  const perMinute = (done * 60_000) / elapsedMs;
  const rate = perMinute < 10 ? perMinute.toFixed(1) : perMinute.toFixed(0);
  return `${how}, ${rate} a minute, about ${clock(leftMs)} left`;
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
