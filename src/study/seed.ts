import { z } from 'zod';

const LONGEST_TEXT = 200;

export const SEED_RULE = `a whole number of at least 0, or a text of at most ${LONGEST_TEXT} characters that does not look like another number`;

/** What is meant as a number: signs, decimals, grouped digits, exponents, other bases. A date or a version is a text. */
const LIKE_A_NUMBER =
  /^\s*[+-]?\s*(?:(?=\D*\d)[\d.,][\d\s.,_']*(?:e[+-]?\d*)?|0[xob][\da-f]*|nan|\.?inf(?:inity)?)\s*$/i;
const WHOLE_NUMBER = /^(?:0|[1-9]\d*)$/;

/**
 * Whether a text is a seed. Texts such as `-1`, `1.5`, `1e3` or `007` are none: taken as texts they would give results
 * without a hint that the number was mistyped.
 */
export function isSeed(text: string): boolean {
  if (text.trim() === '' || text.length > LONGEST_TEXT) return false;
  if (WHOLE_NUMBER.test(text)) return Number.isSafeInteger(Number(text));
  return !LIKE_A_NUMBER.test(text);
}

/** The key `seed`. */
export const SEED = z.union(
  [
    z.number(SEED_RULE).int(SEED_RULE).gte(0, SEED_RULE),
    z.string(SEED_RULE).min(1, SEED_RULE).max(LONGEST_TEXT, SEED_RULE).refine(isSeed, SEED_RULE),
  ],
  SEED_RULE,
);
