import { z } from 'zod';
import { amount, choice } from './amount.js';
import { bleedSection } from './bleed.js';
import { CHARGER } from './charger.js';
import { CONDUCTOR } from './conductor.js';
import { NETWORK } from './custom-wiring.js';
import { EQUALISER } from './equaliser.js';
import { LEAD_CONDUCTORS } from './lead-conductors.js';
import { STRING_LEADS } from './leads.js';
import { LOAD } from './load.js';
import { moduleId, NAME, NAME_RULE } from './names.js';
import { BANK_RATINGS } from './ratings.js';
import { atMostOneOf, named, section } from './section.js';
import { SLOT_OFFSET } from './slot-offset.js';
import { takeOffKeys } from './take-off.js';
import { UPKEEP } from './upkeep.js';

/** Longest string and most strings in parallel; with 16 cells per module that is 64 cells in series at most. */
const MOST_POSITIONS = 4;
const MOST_STRINGS = 8;

const STRINGS_RULE = `a list of 1 to ${MOST_STRINGS} strings such as [[A1, A2], [B1, B2]]`;
const STRING_RULE = `a list of 1 to ${MOST_POSITIONS} modules from the negative end`;

const options = {
  string_lead_mOhm: STRING_LEADS.optional(),
  link_mOhm: amount(
    { atLeast: 0.001, atMost: 1e7 },
    { description: 'Between neighbouring strings at equal positions, cross-linked only.', default: 1 },
  ).optional(),
  charger: CHARGER.optional(),
  load: LOAD.optional(),
  commissioning: choice(['as-received', 'each-module-full'], {
    description: 'Put together as the modules arrive, or after each was charged alone to full.',
    default: 'as-received',
  }).optional(),
  bleed: bleedSection((nominal) => nominal)
    .meta({ description: 'Replaces the bleed of every module, key by key.' })
    .optional(),
  slot_temperature_offset_K: SLOT_OFFSET.optional(),
  string_lead: LEAD_CONDUCTORS.optional(),
  link: CONDUCTOR.meta({ description: 'Instead of link_mOhm: the link as a conductor.' }).optional(),
  ...takeOffKeys,
  ratings: BANK_RATINGS.optional(),
  equaliser: EQUALISER.nullable()
    .meta({ description: 'A device between neighbouring modules of every string; null = none.', default: null })
    .optional(),
  upkeep: UPKEEP.meta({
    description: 'Visits at which every module is charged alone to full; null = none.',
    default: null,
  }).optional(),
};

const ONE_LEAD = atMostOneOf('string_lead_mOhm', 'string_lead');
const ONE_LINK = atMostOneOf('link_mOhm', 'link');
const ONE_SEGMENT = atMostOneOf('bus_segment_mOhm', 'bus_segment');

/** The section `bank`: options of every candidate that does not say otherwise. */
export const BANK = section(options)
  .refine(...ONE_LEAD)
  .refine(...ONE_LINK)
  .refine(...ONE_SEGMENT);

/** One way of wiring the bank. */
const CANDIDATE = section({
  title: z
    .string('a text')
    .max(200, 'a text of at most 200 characters')
    .meta({ description: 'Text for readers of the study.' })
    .optional(),
  wiring: choice(['strings', 'cross-linked', 'native', 'custom'], {
    description:
      'Strings that meet at the bus only; strings tied at equal positions; one BMS per string; a network of its own.',
  }),
  modules: z
    .array(z.array(moduleId, STRING_RULE).min(1, STRING_RULE).max(MOST_POSITIONS, STRING_RULE), STRINGS_RULE)
    .min(1, STRINGS_RULE)
    .max(MOST_STRINGS, STRINGS_RULE)
    .meta({
      description: `Modules of each string from its negative end: at most ${MOST_POSITIONS} in series (64 cells), ${MOST_STRINGS} in parallel.`,
    }),
  network: NETWORK.meta({ description: 'Nodes and branches of the wiring custom.' }).optional(),
  ...options,
})
  .refine(...ONE_LEAD)
  .refine(...ONE_LINK)
  .refine(...ONE_SEGMENT);

/** The section `candidates`. */
export const CANDIDATES = named(NAME, NAME_RULE, CANDIDATE);

export type BankInput = z.infer<typeof BANK>;
export type CandidateInput = z.infer<typeof CANDIDATE>;
