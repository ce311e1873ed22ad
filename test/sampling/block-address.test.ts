import { expect, test } from 'vitest';
import { blockAddress } from '../../src/sampling/block-address.js';

test('instances fill one block after the other', () => {
  expect(blockAddress(1, 32)).toEqual({ block: 1, index: 1 });
  expect(blockAddress(32, 32)).toEqual({ block: 1, index: 32 });
  expect(blockAddress(33, 32)).toEqual({ block: 2, index: 1 });
  expect(blockAddress(7, 1)).toEqual({ block: 7, index: 1 });
  expect(blockAddress(1_000_000, 64)).toEqual({ block: 15_625, index: 64 });
});

test('what is no instance or no block size is refused', () => {
  for (const wrong of [0, -1, 1.5, Number.NaN, Number.POSITIVE_INFINITY]) {
    expect(() => blockAddress(wrong, 32)).toThrow(RangeError);
    expect(() => blockAddress(1, wrong)).toThrow(RangeError);
  }
});
