import { once } from 'node:events';
import { setTimeout as pause } from 'node:timers/promises';
import { describe, expect, it } from 'vitest';
import { watchBeats } from '../../src/execution/watch-beats.js';

const oneCount = () => new Int32Array(new SharedArrayBuffer(4));

describe('the watch over a thread', () => {
  it('stays quiet while the count is raised, however long that goes on, and tells when it is not any more', async () => {
    const beats = oneCount();
    const watch = watchBeats(beats, 200);
    const raise = setInterval(() => Atomics.add(beats, 0, 1), 20);
    await pause(1000);
    expect(watch.stalled.aborted).toBe(false);
    clearInterval(raise);
    await once(watch.stalled, 'abort');
    expect(watch.stalled.reason).toEqual(new Error('no bank was finished within 0.2 s'));
    watch.end();
  });

  it('ends with its thread', async () => {
    const watch = watchBeats(oneCount(), 20);
    watch.end();
    await pause(100);
    expect(watch.stalled.aborted).toBe(false);
  });
});
