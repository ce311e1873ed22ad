import type { z } from 'zod';
import { AGEING_LAWS } from './ageing-settings.js';
import { amount, choice } from './amount.js';
import { section } from './section.js';
import { moduleSpread } from './spread.js';

const RATE = { description: 'Factor on the fade of the law.', default: 1 } as const;
const rate = amount({ atLeast: 0, atMost: 100 }, RATE);

/** Section `ageing` of a stock, its rate as `leaf` makes it. */
function ageingSection<L extends z.ZodType>(leaf: (nominal: z.ZodNumber) => L) {
  return section({
    law: choice([...AGEING_LAWS, 'none'], {
      description:
        'Law by which cells lose capacity from cycle to cycle: Wang et al. 2011 by throughput, Naumann et al. 2018 and 2020 by time and cycles.',
      default: 'none',
    }).optional(),
    initial_fade_percent: amount(
      { atLeast: 0, atMost: 60 },
      { description: 'Share of the capacity when new that is gone already; capacity_Ah is what is left.', default: 0 },
    ).optional(),
    resistance_growth: amount(
      { atLeast: 0, atMost: 50 },
      {
        description: 'Growth of the cell resistance per loss of capacity, as shares of what both are now.',
        default: 5,
      },
    ).optional(),
    rate: leaf(rate).meta(RATE).optional(),
  });
}

/** Ageing of a population: its rate may spread between modules. */
export const POPULATION_AGEING = ageingSection(moduleSpread);
/** Ageing of a module written down. */
export const EXPLICIT_AGEING = ageingSection((nominal) => nominal);

/** What both have in common; a number is a spread of nothing. */
export type AgeingInput = z.infer<typeof POPULATION_AGEING>;

/**
 * Defaults of what ages [own choice]. A growth of 5 is the common pair of the end of life, twice the resistance at 80 %
 * of the capacity (common practice, no source), and that of the grade `older` against `new-same-make`.
 */
export const DEFAULT_AGEING = {
  initial_fade_percent: 0,
  resistance_growth: 5,
  rate: 1,
} as const satisfies AgeingInput;
