import type { z } from 'zod';
import { amount, choice } from './amount.js';
import { section } from './section.js';

const BLEED_RULES = ['each', 'above-lowest', 'none'] as const;
const BLEED_TIMES = ['charging', 'always'] as const;

export const cellVoltage = (description: string, standard?: number) =>
  amount({ above: 0, atMost: 10 }, { description, ...(standard !== undefined && { default: standard }) });

/** Difference between start and stop of bleeding unless the study says otherwise [own choice], V. */
export const STOP_BELOW_START_V = 0.02;

/** @returns schema of the bleed of a module, its current and start as `leaf` makes them (a spread, or a number) */
export function bleedSection<L extends z.ZodType>(leaf: (nominal: z.ZodNumber) => L) {
  return section({
    rule: choice(BLEED_RULES, {
      description:
        'Which cells may bleed above start_V: each of them; those more than delta_mV above the lowest of the module; none.',
      default: 'above-lowest',
    }).optional(),
    when: choice(BLEED_TIMES, {
      description: 'Only while charge current flows, or always.',
      default: 'always',
    }).optional(),
    start_V: leaf(cellVoltage('Cell voltage above which bleeding starts.', 3.45)).optional(),
    stop_V: amount({ above: 0, atMost: 10 }, { description: 'Default: 20 mV below the start.' }).optional(),
    current_mA: leaf(
      amount({ atLeast: 0, atMost: 100_000 }, { description: 'Current of a cell that bleeds.', default: 50 }),
    ).optional(),
    delta_mV: amount(
      { atLeast: 0, atMost: 1000 },
      { description: 'For above-lowest: how far above the lowest cell bleeding starts.', default: 10 },
    ).optional(),
  });
}
