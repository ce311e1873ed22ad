import type { z } from 'zod';
import { amount, choice } from './amount.js';
import { section } from './section.js';

const BLEED_RULES = ['each', 'above-lowest', 'none'] as const;
const BLEED_TIMES = ['charging', 'always'] as const;

export const cellVoltage = amount({ above: 0, atMost: 10 });
const bleedCurrent = amount({ atLeast: 0, atMost: 100_000 });

/** Difference between start and stop of bleeding unless the study says otherwise [own choice], V. */
export const STOP_BELOW_START_V = 0.02;

/** @returns schema of the bleed of a module, its current and start as `leaf` makes them (a spread, or a number) */
export function bleedSection<L extends z.ZodType>(leaf: (nominal: z.ZodNumber) => L) {
  return section({
    rule: choice(BLEED_RULES, { default: 'above-lowest' }).optional(),
    when: choice(BLEED_TIMES, { default: 'always' }).optional(),
    start_V: leaf(cellVoltage).optional(),
    stop_V: amount({ above: 0, atMost: 10 }, { description: 'Default: 20 mV below the start.' }).optional(),
    current_mA: leaf(bleedCurrent).optional(),
    delta_mV: amount({ atLeast: 0, atMost: 1000 }, { default: 10 }).optional(),
  });
}
