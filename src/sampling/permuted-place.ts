import type { WholeNumbers } from './streams.js';

/**
 * Where a shuffle takes one place. Over all places of one stream it is a permutation, each as likely as any other.
 *
 * The shuffle is that of Durstenfeld: from the last place down, each is exchanged with one of those up to it. Only the
 * place asked for is followed, and once it has been exchanged downwards it stays.
 *
 * @param place from 0
 * @param count of places
 * @param next the stream of the permutation, from its beginning
 * @returns a place from 0 below `count`
 * @see Durstenfeld 1964, Commun. ACM 7(7), 420 (algorithm 235)
 */
export function permutedPlace(place: number, count: number, next: WholeNumbers): number {
  let at = place;
  for (let last = count - 1; last > 0; last--) {
    const other = Math.floor((next() / 2 ** 32) * (last + 1));
    if (at === other) return last;
    if (at === last) at = other;
  }
  return at;
}
