import { describe, expect, it } from 'vitest';
import { blockCount, blockInstances, outcomeLayout, TWIN_BLOCK } from '../../src/outcomes/block.js';

describe('blocks of instances', () => {
  it('cover 1 to the count without gap or overlap, the last one short', () => {
    const sizing = { instances: 70, blockSize: 32 };
    expect(blockCount(sizing)).toBe(3);
    // By hand: 70 = 32 + 32 + 6.
    expect([1, 2, 3].map((block) => blockInstances(block, sizing))).toEqual([
      { first: 1, last: 32 },
      { first: 33, last: 64 },
      { first: 65, last: 70 },
    ]);
  });

  it('begin where they begin whatever the count, so that more instances are an addition', () => {
    expect(blockInstances(2, { instances: 40, blockSize: 32 }).first).toBe(33);
    expect(blockInstances(2, { instances: 4000, blockSize: 32 })).toEqual({ first: 33, last: 64 });
  });

  it('leave no empty block behind a whole number of blocks', () => {
    expect(blockCount({ instances: 64, blockSize: 32 })).toBe(2);
  });

  it('have the twin alone in block 0', () => {
    expect(blockInstances(TWIN_BLOCK, { instances: 64, blockSize: 32 })).toEqual({ first: 0, last: 0 });
  });
});

describe('the layout of outcomes', () => {
  const strings = [
    ['A', 'B', 'C'],
    ['D', 'E', 'F'],
  ];

  it('follows the strings of the candidate and the horizon of the study', () => {
    const layout = outcomeLayout({ cycles: 3 }, { wiring: 'cross-linked', strings });
    expect(layout).toEqual({ strings: 2, positions: 3, checkpoints: [1, 2, 3] });
  });

  it('has one position per string for native packs, whatever their cells came from', () => {
    expect(outcomeLayout({ cycles: 3 }, { wiring: 'native', strings }).positions).toBe(1);
  });
});
