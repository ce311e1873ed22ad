import type { z } from 'zod';
import { amount } from './amount.js';
import type { Layers } from './layers.js';
import type { Reading } from './reading.js';
import { section } from './section.js';
import type { BmsSettings } from './study.js';

/** Below 25 degC, so that a bank of which nothing is said never refuses. */
const WARMEST_DEGC = 20;

/** The section `charge_refusal` of a BMS: cells that are too cold are not charged. */
export const CHARGE_REFUSAL = section({
  below_degC: amount({ atLeast: -60, atMost: WARMEST_DEGC })
    .nullable()
    .meta({ description: 'Module temperature below which charging is refused; null = never.', default: null })
    .optional(),
  release_degC: amount(
    { atLeast: -60, atMost: WARMEST_DEGC },
    { description: 'Module temperature from which it is allowed again.', default: 5 },
  ).optional(),
});

export type ChargeRefusalInput = z.infer<typeof CHARGE_REFUSAL>;

/** Never; a BMS that does refuse, below 0 degC as a rule, releases at 5 degC [trade practice, no source]. */
export const DEFAULT_CHARGE_REFUSAL = { below_degC: null, release_degC: 5 } as const satisfies ChargeRefusalInput;

/** @returns the temperatures of refusal and release, undefined for never; a release that is not warmer is a fault */
export function resolveChargeRefusal(
  layers: Layers<ChargeRefusalInput>,
  reading: Reading,
): BmsSettings['chargeRefusal'] {
  const belowK = layers.siOrNull('below_degC', reading);
  const releaseK = layers.si('release_degC', reading);
  if (belowK === null) return undefined;
  if (!(releaseK > belowK)) {
    const below = layers.pick('below_degC')?.value;
    const release = layers.pick('release_degC');
    const got = `${release?.value}${release?.source === 'default' ? ' by default' : ''}`;
    reading.faultWith(
      [...layers.owner, 'release_degC'],
      `must be a number above the temperature of refusal, ${below} degC, got ${got}`,
    );
  }
  return { belowK, releaseK };
}
