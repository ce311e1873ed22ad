import { z } from 'zod';
import { amount } from './amount.js';
import { section } from './section.js';
import type { StringLeads } from './study.js';
import { siFromKey } from './units.js';

const resistance = amount({ atLeast: 0, atMost: 10_000 });
const part = (where: string) =>
  amount({ atLeast: 0, atMost: 10_000 }, { description: `Lead ${where}.`, default: 0 }).optional();
const RULE = 'a number, or a mapping {negative, between, positive}';

const ONE_STRING = z.union(
  [
    resistance,
    section({
      negative: part('from the bus to the first negative post'),
      between: part('between neighbouring modules, each'),
      positive: part('from the last positive post to the bus'),
    }),
  ],
  RULE,
);

/**
 * Leads of the strings in mOhm: a number is the total of a string, half at either end; a mapping tells the parts
 * (`between` is each of those between neighbouring modules); a list tells every string.
 */
export const STRING_LEADS = z
  .union(
    [
      ONE_STRING,
      z.array(ONE_STRING, RULE).min(1, 'a list with one value per string').max(8, 'a list with one value per string'),
    ],
    `${RULE}, or a list of one per string`,
  )
  .meta({ description: 'Total of a string, or its parts, or a list of one per string.', default: 1.5 });

export type StringLeadsInput = z.infer<typeof STRING_LEADS>;
type OneStringInput = z.infer<typeof ONE_STRING>;

/** Leads of a string [own choice], mOhm. */
export const DEFAULT_LEAD_MOHM = 1.5;

/** @returns the leads of every string, undefined if a list has not one per string */
export function stringLeads(input: StringLeadsInput, strings: number): readonly StringLeads[] | undefined {
  if (!Array.isArray(input)) return Array.from({ length: strings }, () => leadsOf(input as OneStringInput));
  return input.length === strings ? input.map(leadsOf) : undefined;
}

function leadsOf(input: OneStringInput): StringLeads {
  if (typeof input === 'number') {
    const endOhm = siFromKey('mOhm', input / 2);
    return { negativeOhm: endOhm, betweenOhm: 0, positiveOhm: endOhm };
  }
  return {
    negativeOhm: siFromKey('mOhm', input.negative ?? 0),
    betweenOhm: siFromKey('mOhm', input.between ?? 0),
    positiveOhm: siFromKey('mOhm', input.positive ?? 0),
  };
}
