import { z } from 'zod';
import { CONDUCTOR, CONDUCTOR_RULES, type ConductorInput, conductorKeys, conductorOhm } from './conductor.js';
import { section } from './section.js';
import type { StringLeads } from './study.js';

const RULE = 'a conductor such as {length_m, area_mm2}, or a mapping {negative, between, positive} of them';

const part = (where: string) => CONDUCTOR.meta({ description: `Conductor ${where}.` }).optional();
const partKeys = {
  negative: part('from the bus to the first negative post'),
  between: part('between neighbouring modules, each'),
  positive: part('from the last positive post to the bus'),
};

type Parts = { readonly [key in keyof typeof partKeys]?: ConductorInput | undefined };
type OneStringInput = ConductorInput & Parts;

// One mapping with the keys of both forms, not a union: of two mappings that both fail no message could tell which was meant.
const ONE_STRING = CONDUCTOR_RULES.reduce(
  (schema, [rule, words]) => schema.refine((value) => hasParts(value) || rule(value), words),
  section({ ...conductorKeys, ...partKeys }).refine(
    (value) => !hasParts(value) || !hasConductor(value),
    'a conductor, or its parts negative, between, positive alone',
  ),
);

/**
 * Leads of the strings as conductors: one stands for both leads of a string together, half of its length at either end,
 * each with its joints; a mapping tells the parts; a list tells every string.
 */
export const LEAD_CONDUCTORS = z
  .union(
    [
      ONE_STRING,
      z.array(ONE_STRING, RULE).min(1, 'a list with one value per string').max(8, 'a list with one value per string'),
    ],
    `${RULE}, or a list of one per string`,
  )
  .meta({
    description:
      'Instead of string_lead_mOhm: conductors of a string, its two leads together (half at either end, joints at each) or its parts, or a list of one per string.',
  });

export type LeadConductorsInput = z.infer<typeof LEAD_CONDUCTORS>;

/** @returns the leads of every string, undefined if a list has not one per string */
export function leadsOfConductors(input: LeadConductorsInput, strings: number): readonly StringLeads[] | undefined {
  if (!Array.isArray(input)) return Array.from({ length: strings }, () => leadsOf(input as OneStringInput));
  return input.length === strings ? input.map(leadsOf) : undefined;
}

function leadsOf(input: OneStringInput): StringLeads {
  if (!hasParts(input)) {
    const endOhm = conductorOhm(input, 0.5);
    return { negativeOhm: endOhm, betweenOhm: 0, positiveOhm: endOhm };
  }
  const ohm = (part: ConductorInput | undefined): number => (part === undefined ? 0 : conductorOhm(part));
  return { negativeOhm: ohm(input.negative), betweenOhm: ohm(input.between), positiveOhm: ohm(input.positive) };
}

function hasParts(input: Parts): boolean {
  return Object.keys(partKeys).some((key) => input[key as keyof Parts] !== undefined);
}

function hasConductor(input: ConductorInput): boolean {
  return Object.keys(conductorKeys).some((key) => input[key as keyof ConductorInput] !== undefined);
}
