import { describe, expect, it } from 'vitest';
import { ColumnValues } from '../../src/outcomes/column-values.js';
import { pairedCorrelation, pairsOf } from '../../src/questions/pairs.js';

const column = (...values: readonly number[]) => new ColumnValues(Float64Array.from(values));

describe('pairs', () => {
  it('keeps the instances at which both have a value', () => {
    const { first, second } = pairsOf(column(1, Number.NaN, 3, 4), column(5, 6, Number.NaN, 8), null);
    expect([...first]).toEqual([1, 4]);
    expect([...second]).toEqual([5, 8]);
  });

  it('has the correlation of the pairs', () => {
    // Anscombe, The American Statistician 27 (1973) 17, first data set: r = 0.816421.
    const x = column(10, 8, 13, 9, 11, 14, 6, 4, 12, 7, 5);
    const y = column(8.04, 6.95, 7.58, 8.81, 8.33, 9.96, 7.24, 4.26, 10.84, 4.82, 5.68);
    expect(pairedCorrelation(pairsOf(x, y, null))).toBeCloseTo(0.816421, 6);
  });

  it('keeps the digits of values that hardly differ', () => {
    // By hand: y = -x apart from an offset, so r = -1.
    const offset = 1e9;
    const pairs = pairsOf(column(offset + 1, offset + 2, offset + 3), column(-1, -2, -3), null);
    expect(pairedCorrelation(pairs)).toBeCloseTo(-1, 12);
  });

  it('has no correlation where a side does not vary or there is one pair', () => {
    expect(pairedCorrelation(pairsOf(column(1, 2), column(3, 3), null))).toBeNull();
    expect(pairedCorrelation(pairsOf(column(1), column(3), null))).toBeNull();
    expect(pairedCorrelation(pairsOf(column(), column(), null))).toBeNull();
  });
});
