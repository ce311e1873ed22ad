/** A watch over one thread at work. */
export interface BeatWatch {
  /** Aborted, with an error as its reason, once the thread stalls. */
  readonly stalled: AbortSignal;
  readonly end: () => void;
}

/**
 * Watches a count that a thread raises. Time is that of timers, which no change of the clock disturbs and which stands
 * still with a machine that sleeps.
 *
 * @param stallMs without a change for so long the thread stalls
 */
export function watchBeats(beats: Int32Array<SharedArrayBuffer>, stallMs: number): BeatWatch {
  const stalled = new AbortController();
  let seen = Atomics.load(beats, 0);
  const timer = setInterval(() => {
    const now = Atomics.load(beats, 0);
    if (now === seen) stalled.abort(new Error(`no bank was finished within ${stallMs / 1000} s`));
    seen = now;
  }, stallMs);
  return { stalled: stalled.signal, end: () => clearInterval(timer) };
}
