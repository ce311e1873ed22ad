/** A pass looks at one digit of the upper or the lower half of a number; the digits above it are known by then. */
interface Pass {
  readonly half: 'upper' | 'lower';
  readonly shift: number;
  /** Bits of that half that are known. */
  readonly known: number;
}

const BUCKETS = 2 ** 11;
const PASSES: readonly Pass[] = (['upper', 'lower'] as const).flatMap((half) => [
  { half, shift: 21, known: 0 },
  { half, shift: 10, known: -(2 ** 21) },
  { half, shift: 0, known: -(2 ** 10) },
]);

/**
 * The value of a sample at a rank, by radix selection: passes from the highest to the lowest digit of the numbers, each
 * of which counts how many of the values still in question have what digit and keeps the one that the rank falls on. The
 * sample is only read, and the memory beside it does not grow with it.
 *
 * @param values finite, in any order; -0 comes before 0
 * @param rank from 1, the smallest value
 * @throws RangeError if the rank is not a whole number from 1 to the number of values
 */
export function orderStatistic(values: Float64Array, rank: number): number {
  if (!(Number.isInteger(rank) && rank >= 1 && rank <= values.length)) {
    throw new RangeError(`rank must be a whole number from 1 to ${values.length}, got ${rank}`);
  }
  const bits = new DataView(new ArrayBuffer(8));
  const counts = new Uint32Array(BUCKETS);
  const found = { upper: 0, lower: 0 };
  let rest = rank;
  for (const { half, shift, known } of PASSES) {
    counts.fill(0);
    const knownUpper = half === 'upper' ? known : -1;
    const knownLower = half === 'upper' ? 0 : known;
    for (const value of values) {
      bits.setFloat64(0, value);
      const sign = bits.getInt32(0) >> 31;
      // Bits that are in order where the numbers are: all turned round below zero, else the sign alone.
      const upper = bits.getInt32(0) ^ (sign | (1 << 31));
      const lower = bits.getInt32(4) ^ sign;
      if (((upper ^ found.upper) & knownUpper) !== 0 || ((lower ^ found.lower) & knownLower) !== 0) continue;
      const digit = ((half === 'upper' ? upper : lower) >>> shift) & (BUCKETS - 1);
      counts[digit] = (counts[digit] ?? 0) + 1;
    }
    let digit = 0;
    for (; rest > (counts[digit] ?? 0); digit++) rest -= counts[digit] ?? 0;
    found[half] |= digit << shift;
  }
  // Turned back: numbers above zero have the sign bit set here.
  const turned = found.upper < 0 ? 1 << 31 : -1;
  bits.setInt32(0, found.upper ^ turned);
  bits.setInt32(4, found.upper < 0 ? found.lower : ~found.lower);
  return bits.getFloat64(0);
}
