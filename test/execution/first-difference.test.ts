import { describe, expect, it } from 'vitest';
import { firstDifference } from '../../src/execution/first-difference.js';

describe('the first difference of two pieces of plain data', () => {
  it('is none if only the order of keys differs', () => {
    expect(firstDifference({ a: 1, b: [{ c: null }] }, { b: [{ c: null }], a: 1 })).toBeUndefined();
  });

  it.each([
    [{ a: { b: [1, 2] } }, { a: { b: [1, 3] } }, 'a.b.1', 2, 3],
    [{ a: 1, b: 2 }, { a: 1 }, 'b', 2, undefined],
    [{ a: 1 }, { a: 1, b: 2 }, 'b', undefined, 2],
    [[1], [1, 2], '1', undefined, 2],
    [{ a: null }, { a: {} }, 'a', null, {}],
    [{ a: [] }, { a: {} }, 'a', [], {}],
    [{ a: '1' }, { a: 1 }, 'a', '1', 1],
    [1, 2, '', 1, 2],
  ])('of %j and %j is at "%s"', (one, other, path, before, after) => {
    expect(firstDifference(one, other)).toEqual({ path, before, after });
  });
});
