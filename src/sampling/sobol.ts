/** A primitive polynomial over GF(2) and the first direction numbers of one column. */
interface Direction {
  readonly degree: number;
  /** Inner coefficients of the polynomial as bits, highest power first. */
  readonly a: number;
  /** As many odd direction numbers as the degree, the k-th below 2^k. */
  readonly m: readonly number[];
}

/** Digits that are used: a block has at most 4096 = 2^12 instances. */
const DIGITS = 12;

/**
 * Columns 2 to 32 of the table `new-joe-kuo-6.21201`; column 1 is the sequence of van der Corput.
 *
 * @see Joe & Kuo 2008, SIAM J. Sci. Comput. 30(5), 2635-2654
 */
const DIRECTIONS: readonly Direction[] = [
  { degree: 1, a: 0, m: [1] },
  { degree: 2, a: 1, m: [1, 3] },
  { degree: 3, a: 1, m: [1, 3, 1] },
  { degree: 3, a: 2, m: [1, 1, 1] },
  { degree: 4, a: 1, m: [1, 1, 3, 3] },
  { degree: 4, a: 4, m: [1, 3, 5, 13] },
  { degree: 5, a: 2, m: [1, 1, 5, 5, 17] },
  { degree: 5, a: 4, m: [1, 1, 5, 5, 5] },
  { degree: 5, a: 7, m: [1, 1, 7, 11, 19] },
  { degree: 5, a: 11, m: [1, 1, 5, 1, 1] },
  { degree: 5, a: 13, m: [1, 1, 1, 3, 11] },
  { degree: 5, a: 14, m: [1, 3, 5, 5, 31] },
  { degree: 6, a: 1, m: [1, 3, 3, 9, 7, 49] },
  { degree: 6, a: 13, m: [1, 1, 1, 15, 21, 21] },
  { degree: 6, a: 16, m: [1, 3, 1, 13, 27, 49] },
  { degree: 6, a: 19, m: [1, 1, 1, 15, 7, 5] },
  { degree: 6, a: 22, m: [1, 3, 1, 15, 13, 25] },
  { degree: 6, a: 25, m: [1, 1, 5, 5, 19, 61] },
  { degree: 7, a: 1, m: [1, 3, 7, 11, 23, 15, 103] },
  { degree: 7, a: 4, m: [1, 3, 7, 13, 13, 15, 69] },
  { degree: 7, a: 7, m: [1, 1, 3, 13, 7, 35, 63] },
  { degree: 7, a: 8, m: [1, 3, 5, 9, 1, 25, 53] },
  { degree: 7, a: 14, m: [1, 3, 1, 13, 9, 35, 107] },
  { degree: 7, a: 19, m: [1, 3, 1, 5, 27, 61, 31] },
  { degree: 7, a: 21, m: [1, 1, 5, 11, 19, 41, 61] },
  { degree: 7, a: 28, m: [1, 3, 5, 3, 3, 13, 69] },
  { degree: 7, a: 31, m: [1, 1, 7, 13, 1, 19, 1] },
  { degree: 7, a: 32, m: [1, 3, 7, 5, 13, 19, 59] },
  { degree: 7, a: 37, m: [1, 1, 3, 9, 25, 29, 41] },
  { degree: 7, a: 41, m: [1, 3, 5, 13, 23, 1, 55] },
  { degree: 7, a: 42, m: [1, 3, 7, 3, 13, 59, 17] },
];

/** Columns there are. */
export const SOBOL_COLUMNS = 1 + DIRECTIONS.length;

const NUMBERS = [firstColumn(), ...DIRECTIONS.map(directionNumbers)];

/**
 * One coordinate of a point of the sequence of Sobol in the order of Antonov and Saleev.
 *
 *   x = b_1 v_1 xor b_2 v_2 xor ...,   b the digits of place xor floor(place / 2), lowest first
 *
 * The first 2^digits points have every value from 0 to 2^digits - 1 once in every column.
 *
 * @param column from 0, below `SOBOL_COLUMNS`
 * @param place of the point in the sequence, from 0
 * @param digits binary digits kept, at most 12
 * @returns the coordinate times 2^digits, rounded down
 * @see Sobol 1967, USSR Comput. Math. Math. Phys. 7(4), 86-112; Antonov & Saleev 1979, ibid. 19(1), 252-256
 */
export function sobolDigits(column: number, place: number, digits: number): number {
  const numbers = NUMBERS[column];
  if (numbers === undefined) throw new RangeError(`sobol column must be 0 to ${SOBOL_COLUMNS - 1}, got ${column}`);
  let x = 0;
  let rest = place ^ (place >>> 1);
  for (let k = 0; rest !== 0; k++, rest >>>= 1) {
    if ((rest & 1) === 1) x ^= numbers[k] ?? 0;
  }
  return x >>> (DIGITS - digits);
}

function firstColumn(): readonly number[] {
  return Array.from({ length: DIGITS }, (_, k) => 1 << (DIGITS - 1 - k));
}

/**
 * v_k = m_k / 2^k, here times 2^DIGITS, with the recurrence
 *
 *   m_k = 2 a_1 m_(k-1) xor 4 a_2 m_(k-2) xor ... xor 2^s m_(k-s) xor m_(k-s)
 */
function directionNumbers({ degree, a, m }: Direction): readonly number[] {
  const numbers = [...m];
  for (let k = degree; k < DIGITS; k++) {
    const last = numbers[k - degree] ?? 0;
    let next = last ^ (last << degree);
    for (let j = 1; j < degree; j++) {
      if (((a >>> (degree - 1 - j)) & 1) === 1) next ^= (numbers[k - j] ?? 0) << j;
    }
    numbers.push(next);
  }
  return numbers.slice(0, DIGITS).map((number, k) => number << (DIGITS - 1 - k));
}
