import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeBlocks } from '../../src/execution/compute-blocks.js';
import { InstanceFault } from '../../src/execution/instance-fault.js';
import type { BlockTask } from '../../src/outcomes/block.js';

const TASKS: readonly BlockTask[] = Array.from({ length: 9 }, (_, block) => ({ candidate: 'strings', block }));
const never = new AbortController().signal;
const tick = () => new Promise((resolve) => setImmediate(resolve));

describe('computing blocks', () => {
  it('keeps each block once, with its own content, in whatever order they are begun and come back', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.shuffledSubarray([...TASKS], { minLength: TASKS.length }),
        fc.integer({ min: 1, max: 4 }),
        fc.array(fc.integer({ min: 0, max: 3 }), { minLength: 9, maxLength: 9 }),
        async (tasks, inFlight, delays) => {
          const kept: [number, string][] = [];
          await computeBlocks({
            tasks,
            inFlight,
            run: async ({ block }) => {
              for (let ticks = delays[block] ?? 0; ticks > 0; ticks--) await tick();
              return { csv: `content ${block}`, computeS: 0 };
            },
            keep: async ({ block }, { csv }) => {
              kept.push([block, csv]);
            },
            mayFail: () => 0,
            stop: never,
          });
          expect(kept.sort(([a], [b]) => a - b)).toEqual(TASKS.map(({ block }) => [block, `content ${block}`]));
        },
      ),
      { seed: 6, numRuns: 100 },
    );
  });

  it('has as many in flight as there are threads, no more and no fewer', async () => {
    let now = 0;
    const seen: number[] = [];
    await computeBlocks({
      tasks: TASKS,
      inFlight: 3,
      run: async () => {
        now++;
        seen.push(now);
        await tick();
        now--;
        return { csv: '', computeS: 0 };
      },
      keep: async () => {},
      mayFail: () => 0,
      stop: never,
    });
    expect(Math.max(...seen)).toBe(3);
    expect(seen).toHaveLength(TASKS.length);
  });

  it('after a fault begins no further block, but keeps those in flight before it ends', async () => {
    const begun: number[] = [];
    const kept: number[] = [];
    const run = computeBlocks({
      tasks: TASKS,
      inFlight: 2,
      run: async ({ block }) => {
        begun.push(block);
        for (let ticks = 0; ticks < (block === 2 ? 1 : 3); ticks++) await tick();
        if (block === 2) return { fault: { instance: 5, message: 'no convergence', stack: 'Error: no convergence' } };
        return { csv: '', computeS: 0 };
      },
      keep: async ({ block }) => {
        kept.push(block);
      },
      mayFail: () => 0,
      stop: never,
    });
    await expect(run).rejects.toThrow(InstanceFault);
    // By hand: 0 and 1 come back after three turns; then 2 fails after one while 3 is in flight.
    expect(begun).toEqual([0, 1, 2, 3]);
    expect(kept).toEqual([0, 1, 3]);
  });

  it('ends with the error of whoever keeps a block, such as a full disk', async () => {
    const full = new Error('no space left');
    const run = computeBlocks({
      tasks: TASKS,
      inFlight: 2,
      run: async () => ({ csv: '', computeS: 0 }),
      keep: async () => {
        throw full;
      },
      mayFail: () => 0,
      stop: never,
    });
    await expect(run).rejects.toBe(full);
  });
});
