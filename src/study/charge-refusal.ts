import type { z } from 'zod';
import { amount } from './amount.js';
import { section } from './section.js';
import { temperatureSpread } from './spread.js';

/** Below 25 degC, so that a bank of which nothing is said never refuses. */
const WARMEST_DEGC = 20;

const RANGE = { atLeast: -60, atMost: WARMEST_DEGC } as const;
const BELOW = 'Module temperature below which charging is refused; null = never.';
const RELEASE = 'Module temperature from which it is allowed again.';

/** Section `charge_refusal` of a BMS: cells that are too cold are not charged. Its temperatures are as `leaf` makes them. */
function refusalSection<L extends z.ZodType>(leaf: (nominal: z.ZodNumber) => L) {
  return section({
    below_degC: leaf(amount(RANGE)).nullable().meta({ description: BELOW, default: null }).optional(),
    release_degC: leaf(amount(RANGE, { description: RELEASE, default: 5 })).optional(),
  });
}

/** Of a population: both temperatures may spread between modules. */
export const POPULATION_CHARGE_REFUSAL = refusalSection(temperatureSpread);
/** Of a module written down. */
export const EXPLICIT_CHARGE_REFUSAL = refusalSection((nominal) => nominal);

/** What both have in common; a number is a spread of nothing. */
export type ChargeRefusalInput = z.infer<typeof POPULATION_CHARGE_REFUSAL>;

/** Never; a BMS that does refuse, below 0 degC as a rule, releases at 5 degC [trade practice, no source]. */
export const DEFAULT_CHARGE_REFUSAL = { below_degC: null, release_degC: 5 } as const satisfies ChargeRefusalInput;
