import type { z } from 'zod';
import { amount } from './amount.js';
import { busVoltage } from './charger.js';
import type { Layers } from './layers.js';
import type { Reading } from './reading.js';
import { section } from './section.js';
import type { LoadSettings } from './study.js';

/** The section `load`: the low-voltage disconnect. */
export const LOAD = section({
  disconnect_V: busVoltage
    .nullable()
    .meta({ description: 'Bus voltage of the disconnect; null = none. Default: 11.6 V per four cells in series.' })
    .optional(),
  disconnect_delay_s: amount(
    { atLeast: 0, atMost: 86_400 },
    { description: 'How long the bus must be below disconnect_V.', default: 10 },
  ).optional(),
  reconnect_V: busVoltage.meta({ description: 'Default: 13.0 V per four cells in series.' }).optional(),
});

export type LoadInput = z.infer<typeof LOAD>;

/** Levels per four cells in series [trade practice]. */
const DISCONNECT_V = 11.6;
const RECONNECT_V = 13;

/** @param cellsInSeries of the whole bank */
export function defaultLoad(cellsInSeries: number): LoadInput {
  return {
    disconnect_V: (DISCONNECT_V * cellsInSeries) / 4,
    disconnect_delay_s: 10,
    reconnect_V: (RECONNECT_V * cellsInSeries) / 4,
  };
}

/** @returns the disconnect; a reconnection at or below it is a fault */
export function resolveLoad(layers: Layers<LoadInput>, reading: Reading): LoadSettings {
  const disconnectV = layers.siOrNull('disconnect_V', reading);
  const reconnectV = layers.si('reconnect_V', reading);
  if (disconnectV !== null && !(reconnectV > disconnectV)) {
    const path = layers.pick('reconnect_V')?.path ?? layers.owner;
    reading.fault(path, `a number above the disconnect voltage, ${disconnectV} V`);
  }
  return { disconnectV, disconnectDelayS: layers.si('disconnect_delay_s', reading), reconnectV };
}
