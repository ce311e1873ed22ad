import fc from 'fast-check';
import { expect, test } from 'vitest';
import { orderStatistic } from '../../src/statistics/order-statistic.js';

test('every rank holds what sorting puts there, of any numbers', () => {
  const number = fc.oneof(
    fc.double({ noNaN: true, noDefaultInfinity: true }),
    // Many that differ in their last bits only, and ties.
    fc.integer({ min: -4, max: 4 }).map((k) => 1 + k * Number.EPSILON),
    fc.constantFrom(0, -0, Number.MIN_VALUE, -Number.MIN_VALUE, Number.MAX_VALUE, -Number.MAX_VALUE, 2 ** -1022),
  );
  fc.assert(
    fc.property(fc.array(number, { minLength: 1, maxLength: 40 }), (numbers) => {
      const values = Float64Array.from(numbers);
      const sorted = Float64Array.from(numbers).sort();
      expect(Array.from(values, (_, k) => orderStatistic(values, k + 1))).toEqual([...sorted]);
      expect([...values]).toEqual(numbers);
    }),
    { seed: 12, numRuns: 300 },
  );
});

test('the middle of a hundred thousand is where it belongs', () => {
  // By hand: k -> 7919 k mod 100,003 goes through all numbers from 1 to 100,002 once, since 100,003 is prime.
  const values = Float64Array.from({ length: 100_002 }, (_, k) => (7919 * (k + 1)) % 100_003);
  for (const rank of [1, 2, 50_001, 95_002, 100_002]) expect(orderStatistic(values, rank)).toBe(rank);
});

test('a rank that is none is refused', () => {
  for (const rank of [0, 4, 1.5, Number.NaN]) {
    expect(() => orderStatistic(Float64Array.of(1, 2, 3), rank)).toThrow(RangeError);
  }
  expect(() => orderStatistic(new Float64Array(), 1)).toThrow(RangeError);
});
