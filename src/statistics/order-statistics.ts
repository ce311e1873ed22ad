/** Digits that a number is looked at by, from its highest: bits of which half, and how many of them stand below. */
const DIGITS = (['upper', 'lower'] as const).flatMap((half) => [21, 10, 0].map((shift) => ({ half, shift })));
const DIGIT_VALUES = 2 ** 11;

/** So few values are sorted at once. */
const FEW = 4096;

/** Which of the two 32-bit words of a number in memory holds its sign: it depends on the machine. */
const UPPER_WORD = new Int32Array(Float64Array.of(1).buffer)[0] === 0 ? 1 : 0;
const SIGN = 1 << 31;

/** Values that agree in their first digits, and which of them are wanted. */
interface Agreeing {
  readonly digits: number;
  /** Both halves as far as they are known, in the order of numbers. */
  readonly upper: number;
  readonly lower: number;
  readonly count: number;
  /** Number of values before all of these. */
  readonly before: number;
  /** Ranks in the whole sample. */
  readonly ranks: readonly number[];
}

/**
 * The values of a sample at some ranks, by radix selection: a pass over the sample counts how many values have what first
 * digit, further passes do the same with the next digit among those values that a rank falls on, until so few are left
 * that they can be sorted. The sample is only read, and the memory beside it does not grow with it.
 *
 * @param values finite, in any order; -0 comes before 0
 * @param ranks from 1, the smallest value, in any order
 * @returns values by rank
 * @throws RangeError if a rank is not a whole number from 1 to the number of values
 */
export function orderStatistics(values: Float64Array, ranks: readonly number[]): ReadonlyMap<number, number> {
  for (const rank of ranks) {
    if (!(Number.isInteger(rank) && rank >= 1 && rank <= values.length)) {
      throw new RangeError(`rank must be a whole number from 1 to ${values.length}, got ${rank}`);
    }
  }
  const found = new Map<number, number>();
  const open: Agreeing[] = [{ digits: 0, upper: 0, lower: 0, count: values.length, before: 0, ranks }];
  for (let group = open.pop(); group !== undefined; group = open.pop()) {
    if (group.count > FEW && group.digits < DIGITS.length) {
      open.push(...split(values, group));
      continue;
    }
    const first = group.before + 1;
    const sorted = group.digits < DIGITS.length ? agreeingValues(values, group).sort() : null;
    for (const rank of group.ranks)
      found.set(rank, sorted === null ? numberOf(group) : (sorted[rank - first] ?? Number.NaN));
  }
  return found;
}

/** The groups by one digit more on which a rank falls. */
function split(values: Float64Array, group: Agreeing): readonly Agreeing[] {
  const digit = DIGITS[group.digits];
  if (digit === undefined) return [];
  const groups: Agreeing[] = [];
  let { before } = group;
  for (const [value, count] of digitCounts(values, group, digit.half === 'upper', digit.shift).entries()) {
    const ranks = group.ranks.filter((rank) => rank > before && rank <= before + count);
    const bits = group[digit.half] | (value << digit.shift);
    if (ranks.length > 0) groups.push({ ...group, digits: group.digits + 1, [digit.half]: bits, count, before, ranks });
    before += count;
  }
  return groups;
}

function digitCounts(values: Float64Array, group: Agreeing, ofUpper: boolean, shift: number): Uint32Array {
  const counts = new Uint32Array(DIGIT_VALUES);
  const words = new Int32Array(values.buffer, values.byteOffset, 2 * values.length);
  const known = masksOf(group.digits);
  for (let at = 0; at < words.length; at += 2) {
    const sign = words[at + UPPER_WORD] >> 31;
    const upper = words[at + UPPER_WORD] ^ (sign | SIGN);
    const lower = words[at + 1 - UPPER_WORD] ^ sign;
    if (((upper ^ group.upper) & known.upper) !== 0 || ((lower ^ group.lower) & known.lower) !== 0) continue;
    counts[((ofUpper ? upper : lower) >>> shift) & (DIGIT_VALUES - 1)]++;
  }
  return counts;
}

function agreeingValues(values: Float64Array, group: Agreeing): Float64Array {
  const words = new Int32Array(values.buffer, values.byteOffset, 2 * values.length);
  const known = masksOf(group.digits);
  const agreeing = new Float64Array(group.count);
  let taken = 0;
  for (let k = 0; k < values.length; k++) {
    const sign = words[2 * k + UPPER_WORD] >> 31;
    const upper = words[2 * k + UPPER_WORD] ^ (sign | SIGN);
    const lower = words[2 * k + 1 - UPPER_WORD] ^ sign;
    if (((upper ^ group.upper) & known.upper) !== 0 || ((lower ^ group.lower) & known.lower) !== 0) continue;
    agreeing[taken++] = values[k];
  }
  return agreeing;
}

/** Bits of both halves that are known once so many digits are. */
function masksOf(digits: number): { readonly upper: number; readonly lower: number } {
  const ofHalf = (own: number): number => [0, -(2 ** 21), -(2 ** 10)][Math.max(0, own)] ?? -1;
  return { upper: ofHalf(digits), lower: ofHalf(digits - 3) };
}

/** The number whose ordered bits are all known: bits are in order where the sign, and below zero all, are turned round. */
function numberOf(bits: Agreeing): number {
  const sign = ~(bits.upper >> 31);
  const words = new Int32Array(2);
  words[UPPER_WORD] = bits.upper ^ (sign | SIGN);
  words[1 - UPPER_WORD] = bits.lower ^ sign;
  return new Float64Array(words.buffer)[0];
}
