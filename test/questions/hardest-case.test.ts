import { describe, expect, it } from 'vitest';
import { ColumnValues } from '../../src/outcomes/column-values.js';
import { harderCase } from '../../src/questions/hardest-case.js';

const column = (...values: readonly number[]) => new ColumnValues(Float64Array.from(values));

describe('hardest case', () => {
  it('is the bank with the greatest lost capacity', () => {
    expect(harderCase('strings', column(3, 19.3, 7), column(30, 20, 0), null)).toEqual({
      candidate: 'strings',
      instance: 2,
      lostCapacityPercent: 19.3,
      loadLostCycles: 20,
    });
  });

  it('is, of equal losses, the bank that loses load most often, then the first', () => {
    expect(harderCase('strings', column(5, 5, 5), column(1, 4, 4), null)?.instance).toBe(2);
  });

  it('is sought by lost load where no capacity is known', () => {
    const none = column(Number.NaN, Number.NaN);
    expect(harderCase('strings', none, column(2, 9), null)).toMatchObject({ instance: 2, lostCapacityPercent: null });
  });

  it('stays with an earlier candidate unless beaten', () => {
    const first = harderCase('strings', column(8), column(0), null);
    expect(harderCase('cross', column(8), column(0), first)?.candidate).toBe('strings');
    expect(harderCase('cross', column(8.1), column(0), first)?.candidate).toBe('cross');
  });

  it('does not exist where nothing is lost', () => {
    expect(harderCase('strings', column(0, -0.2, Number.NaN), column(0, 0, 0), null)).toBeNull();
  });
});
