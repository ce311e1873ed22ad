import { amount, choice } from './amount.js';
import { CONDUCTOR, conductorOhm } from './conductor.js';
import { firstKeyOf } from './first-key.js';
import type { Layers } from './layers.js';
import type { Reading } from './reading.js';
import type { TakeOff } from './study.js';
import { renderPath } from './study-path.js';
import { inUnitOfKey } from './units.js';

/** Between the taps of neighbouring strings on a busbar, mOhm [own choice]. */
export const DEFAULT_BUS_SEGMENT_MOHM = 0.1;
const LEAST_SEGMENT_OHM = 1e-7;

/** Keys of a bank or candidate that say where charger and load are connected, and what lies between the strings there. */
export const takeOffKeys = {
  take_off: choice(['equal-leads', 'same-end', 'diagonal'], {
    description:
      'Where charger and load are connected: to a star of equal leads; to both rails at the first string; to minus at the first and plus at the last.',
    default: 'equal-leads',
  }).optional(),
  bus_segment_mOhm: amount(
    { atLeast: 0.0001, atMost: 1000 },
    {
      description: 'Of either rail, between the taps of neighbouring strings; not with equal-leads.',
      default: DEFAULT_BUS_SEGMENT_MOHM,
    },
  ).optional(),
  bus_segment: CONDUCTOR.meta({ description: 'Instead of bus_segment_mOhm: the segment as a conductor.' }).optional(),
};

type TakeOffInput = {
  take_off?: 'equal-leads' | 'same-end' | 'diagonal' | undefined;
  bus_segment_mOhm?: number | undefined;
  bus_segment?: Parameters<typeof conductorOhm>[0] | undefined;
};

/** @returns the take-off, null for a star of equal leads, which has no rails */
export function resolveTakeOff(options: Layers<TakeOffInput>, strings: number, reading: Reading): TakeOff | null {
  const kind = options.setting('take_off', reading);
  if (kind === 'equal-leads') {
    const [own] = options.layers;
    for (const key of ['bus_segment_mOhm', 'bus_segment'] as const) {
      if (own?.source === 'study' && own.values[key] !== undefined) {
        reading.fault([...own.path, key], 'absent unless take_off is same-end or diagonal');
      }
    }
    return null;
  }
  const key = firstKeyOf(options, 'bus_segment_mOhm', 'bus_segment');
  let ohm: number;
  if (key === 'bus_segment') {
    const conductor = options.setting('bus_segment', reading);
    ohm = conductorOhm(conductor);
    const { path, source } = options.pick('bus_segment') ?? { path: options.owner, source: 'study' };
    if (!(ohm >= LEAST_SEGMENT_OHM)) reading.faultWith(path, 'must be a conductor of at least 0.0001 mOhm, got less');
    const value = String(Number(inUnitOfKey('mOhm', ohm).toPrecision(6)));
    reading.origins.push({ path: renderPath([...options.owner, 'bus_segment_mOhm']), value, unit: 'mOhm', source });
  } else ohm = options.si('bus_segment_mOhm', reading);
  return { kind, segmentOhm: Array.from({ length: strings - 1 }, () => ohm) };
}
