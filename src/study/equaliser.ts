import type { z } from 'zod';
import { amount } from './amount.js';
import { busVoltage } from './charger.js';
import type { Layers } from './layers.js';
import type { Reading } from './reading.js';
import { section } from './section.js';
import type { EqualiserSettings } from './study.js';

/** The section `equaliser` of the bank or of a candidate: one device between neighbouring modules of every string. */
export const EQUALISER = section({
  current_A: amount(
    { above: 0, atMost: 1000 },
    { description: 'Greatest current taken from the module of higher voltage.', default: 5 },
  ).optional(),
  start_mV: amount(
    { atLeast: 0, atMost: 10_000 },
    { description: 'Difference of module voltages from which it moves charge.', default: 20 },
  ).optional(),
  full_mV: amount(
    { above: 0, atMost: 100_000 },
    { description: 'Difference at which it reaches its greatest current.', default: 100 },
  ).optional(),
  efficiency_percent: amount(
    { above: 0, atMost: 100 },
    { description: 'Charge delivered of charge taken; at equal voltages also of power.', default: 90 },
  ).optional(),
  standby_mA: amount(
    { atLeast: 0, atMost: 10_000 },
    { description: 'Drawn by each device from both of its modules.', default: 5 },
  ).optional(),
  enable_V: busVoltage
    .nullable()
    .meta({
      description: 'Bank voltage above which it works; null = always. Default: 13.6 V per four cells in series.',
    })
    .optional(),
});

export type EqualiserInput = z.infer<typeof EQUALISER>;

/** Level per four cells in series: above the plateau at rest, below absorption (own choice). */
const ENABLE_V = 13.6;

/** @param cellsInSeries of the whole bank */
export function defaultEqualiser(cellsInSeries: number): EqualiserInput {
  return {
    current_A: 5,
    start_mV: 20,
    full_mV: 100,
    efficiency_percent: 90,
    standby_mA: 5,
    enable_V: (ENABLE_V * cellsInSeries) / 4,
  };
}

/** @returns the equaliser; a greatest current at or below the start is a fault */
export function resolveEqualiser(layers: Layers<EqualiserInput>, reading: Reading): EqualiserSettings {
  const startV = layers.si('start_mV', reading);
  const fullV = layers.si('full_mV', reading);
  if (!(fullV > startV)) {
    const path = layers.pick('full_mV')?.path ?? layers.owner;
    reading.faultWith(path, `must be a number above the start, ${1000 * startV} mV, got ${1000 * fullV}`);
  }
  return {
    currentA: layers.si('current_A', reading),
    startV,
    fullV,
    efficiency: layers.si('efficiency_percent', reading),
    standbyA: layers.si('standby_mA', reading),
    enableV: layers.siOrNull('enable_V', reading),
  };
}
