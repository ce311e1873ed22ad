import { z } from 'zod';

/** Bounds of a number in a study. */
export interface Range {
  readonly above?: number;
  readonly atLeast?: number;
  readonly below?: number;
  readonly atMost?: number;
}

/** What the JSON Schema tells about a key beside its rule. */
export type About = {
  readonly description?: string;
  readonly default?: number | string | boolean | null;
};

/** @returns schema of a number within bounds; every fault of it states the whole rule */
export function amount(range: Range, about: About = {}): z.ZodNumber {
  const rule = rangeRule('a number', range);
  return bounded(z.number(rule), rule, range).meta(about);
}

/** @returns schema of a whole number within bounds */
export function count(range: Range, about: About = {}): z.ZodNumber {
  const rule = rangeRule('a whole number', range);
  return bounded(z.number(rule).int(rule), rule, range).meta(about);
}

/** @returns schema of one of a few words */
export function choice<const W extends readonly [string, ...string[]]>(
  words: W,
  about: About = {},
): z.ZodEnum<{
  [K in W[number]]: K;
}> {
  return z.enum(words, `one of ${words.join(', ')}`).meta(about);
}

/** @returns the rule in words: `a number above 0 and at most 100` */
function rangeRule(kind: string, { above, atLeast, below, atMost }: Range): string {
  if (atLeast !== undefined && atMost !== undefined) return `${kind} from ${atLeast} to ${atMost}`;
  const parts: string[] = [];
  if (above !== undefined) parts.push(`above ${above}`);
  if (atLeast !== undefined) parts.push(`of at least ${atLeast}`);
  if (below !== undefined) parts.push(`below ${below}`);
  if (atMost !== undefined) parts.push(`at most ${atMost}`);
  return [kind, parts.join(' and ')].join(' ').trim();
}

function bounded(schema: z.ZodNumber, rule: string, { above, atLeast, below, atMost }: Range): z.ZodNumber {
  let result = schema;
  if (above !== undefined) result = result.gt(above, rule);
  if (atLeast !== undefined) result = result.gte(atLeast, rule);
  if (below !== undefined) result = result.lt(below, rule);
  if (atMost !== undefined) result = result.lte(atMost, rule);
  return result;
}
