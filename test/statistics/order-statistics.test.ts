import fc from 'fast-check';
import { expect, test } from 'vitest';
import { orderStatistics } from '../../src/statistics/order-statistics.js';

const ANY_NUMBER = fc.oneof(
  fc.double({ noNaN: true, noDefaultInfinity: true }),
  // Many that differ in their last bits only, and both zeros.
  fc.integer({ min: -4, max: 4 }).map((k) => 1 + k * Number.EPSILON),
  fc.integer({ min: -4, max: 4 }).map((k) => -1 + k * Number.EPSILON),
  fc.constantFrom(0, -0, Number.MIN_VALUE, -Number.MIN_VALUE, Number.MAX_VALUE, -Number.MAX_VALUE, 2 ** -1022),
);

function expectSorted(numbers: readonly number[], ranks: readonly number[]): void {
  const values = Float64Array.from(numbers);
  const sorted = Float64Array.from(numbers).sort();
  const found = orderStatistics(values, ranks);
  expect(ranks.map((rank) => found.get(rank))).toEqual(ranks.map((rank) => sorted[rank - 1]));
  expect(values.every((value, k) => Object.is(value, numbers[k]))).toBe(true);
}

test('every rank holds what sorting puts there', () => {
  fc.assert(
    fc.property(fc.array(ANY_NUMBER, { minLength: 1, maxLength: 40 }), (numbers) => {
      expectSorted(
        numbers,
        numbers.map((_, k) => k + 1),
      );
    }),
    { seed: 12, numRuns: 200 },
  );
});

test('so it does among so many that passes are needed, with ties of any length', () => {
  fc.assert(
    fc.property(
      fc.array(ANY_NUMBER, { minLength: 1, maxLength: 12 }),
      fc.integer({ min: 1, max: 99 }),
      (few, stride) => {
        const many = Array.from({ length: 20_000 }, (_, k) => few[(k * stride + (k >> 7)) % few.length] ?? 0);
        expectSorted(many, [1, 2, 499, 5_000, 9_999, 10_000, 15_001, 19_001, 20_000]);
      },
    ),
    { seed: 13, numRuns: 25 },
  );
});

test('the values between a hundred thousand are where they belong', () => {
  // By hand: k -> 7919 k mod 100,003 goes through all numbers from 1 to 100,002 once, since 100,003 is prime.
  const values = Float64Array.from({ length: 100_002 }, (_, k) => (7919 * (k + 1)) % 100_003);
  const ranks = [95_002, 1, 50_001, 50_002, 1, 100_002];
  expect([...orderStatistics(values, ranks)].sort(([a], [b]) => a - b)).toEqual(
    [1, 50_001, 50_002, 95_002, 100_002].map((rank) => [rank, rank]),
  );
});

test('a rank that is none is refused', () => {
  for (const rank of [0, 4, 1.5, Number.NaN]) {
    expect(() => orderStatistics(Float64Array.of(1, 2, 3), [1, rank])).toThrow(RangeError);
  }
  expect(() => orderStatistics(new Float64Array(), [1])).toThrow(RangeError);
});
