import type { WholeNumbers } from './streams.js';

/**
 * Nested uniform scrambling in base 2: every binary digit is flipped or not by a coin of its own for each string of
 * digits before it, so that points that shared a stratum of any size still share one.
 *
 * The coins are the bits of the stream: that of the digits b_1 ... b_k before has the number 1 b_1 ... b_k in binary.
 *
 * @param x a whole number of `digits` binary digits
 * @param next the stream of the column, from its beginning
 * @returns a whole number of as many digits; over all x it is a permutation
 * @see Owen 1995, Randomly permuted (t,m,s)-nets and (t,s)-sequences, Lecture Notes in Statistics 106, 299-317
 */
export function nestedScramble(x: number, digits: number, next: WholeNumbers): number {
  let scrambled = x;
  let coins = 0;
  let taken = 0;
  for (let k = 0; k < digits; k++) {
    const coin = (1 << k) | (x >>> (digits - k));
    for (; taken <= coin >>> 5; taken++) coins = next();
    if (((coins >>> (coin & 31)) & 1) === 1) scrambled ^= 1 << (digits - 1 - k);
  }
  return scrambled;
}
