import { expect, test } from 'vitest';
import { nestedScramble } from '../../src/sampling/nested-scramble.js';
import { permutedPlace } from '../../src/sampling/permuted-place.js';
import { columnStream, type WholeNumbers } from '../../src/sampling/streams.js';
import { BAND } from './samples.js';

const streamOf = (block: number): WholeNumbers =>
  columnStream({ seed: '12', block, index: 1, stock: null, module: null, level: 'bank', cell: null }, 'loadFactor');
const places = (count: number): number[] => Array.from({ length: count }, (_, place) => place);

/** How often each of `outcomes` came up, in standard deviations from the equal share. */
function excess(drawn: readonly string[], outcomes: number): readonly number[] {
  const counts = new Map<string, number>();
  for (const one of drawn) counts.set(one, (counts.get(one) ?? 0) + 1);
  expect(counts.size).toBe(outcomes);
  const share = 1 / outcomes;
  const sd = Math.sqrt(drawn.length * share * (1 - share));
  return [...counts.values()].map((count) => (count - drawn.length * share) / sd);
}

test('a shuffle takes every place to another, as a shuffle of the whole list would', () => {
  for (const [block, count] of [1, 2, 3, 32, 100, 4096].entries()) {
    const list = places(count);
    const next = streamOf(block);
    for (let last = count - 1; last > 0; last--) {
      const other = Math.floor((next() / 2 ** 32) * (last + 1));
      [list[last], list[other]] = [list[other] ?? 0, list[last] ?? 0];
    }
    // The list holds at each place what came there; a place is asked where it went.
    expect(places(count).map((place) => list[permutedPlace(place, count, streamOf(block))])).toEqual(places(count));
  }
});

test('all shuffles of four come up as often as each other', () => {
  // By hand: 4! = 24; counts of 24,000 shuffles within the band of a binomial share.
  const drawn = places(24_000).map((block) =>
    places(4)
      .map((place) => permutedPlace(place, 4, streamOf(block)))
      .join(),
  );
  for (const score of excess(drawn, 24)) expect(Math.abs(score)).toBeLessThan(BAND);
});

test('scrambled digits are a permutation that keeps together what shared its first digits', () => {
  for (const digits of [0, 1, 3, 5, 12]) {
    const count = 2 ** digits;
    const scrambled = places(count).map((x) => nestedScramble(x, digits, streamOf(digits)));
    expect([...scrambled].sort((a, b) => a - b)).toEqual(places(count));
    for (let kept = 0; kept <= digits; kept++) {
      const strata = new Map<number, Set<number>>();
      scrambled.forEach((y, x) => {
        const together = strata.get(x >> (digits - kept)) ?? new Set();
        strata.set(x >> (digits - kept), together.add(y >> (digits - kept)));
      });
      expect([...strata.values()].every((together) => together.size === 1)).toBe(true);
    }
  }
});

test('every nested scramble comes up as often as any other', () => {
  // By hand: two digits have three coins, one for the first digit and one each for the second after 0 and after 1.
  const drawn = places(8_000).map((block) =>
    places(4)
      .map((x) => nestedScramble(x, 2, streamOf(block)))
      .join(),
  );
  for (const score of excess(drawn, 8)) expect(Math.abs(score)).toBeLessThan(BAND);
});
