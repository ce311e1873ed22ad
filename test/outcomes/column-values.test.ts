import { describe, expect, it } from 'vitest';
import { ColumnValues } from '../../src/outcomes/column-values.js';

describe('a column of outcomes', () => {
  const column = new ColumnValues(Float64Array.of(3, Number.NaN, 0));

  it('lists the values that are there and counts the others', () => {
    expect([...column.present]).toEqual([3, 0]);
    expect(column.absent).toBe(1);
    expect(column.instances).toBe(3);
  });

  it('gives null for an absent value and never NaN', () => {
    expect([1, 2, 3].map((instance) => column.at(instance))).toEqual([3, null, 0]);
  });

  it('has no instance 0 and none beyond its end', () => {
    expect(() => column.at(0)).toThrow(RangeError);
    expect(() => column.at(4)).toThrow('no instance 4 among 3');
  });
});
