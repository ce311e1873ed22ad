import type { z } from 'zod';
import { amount, choice } from './amount.js';
import type { Layers } from './layers.js';
import type { Reading } from './reading.js';
import { section } from './section.js';
import type { ChargerSettings } from './study.js';
import type { StudyPath } from './study-path.js';

export const busVoltage = amount({ above: 0, atMost: 1000 });
const hours = amount({ above: 0, atMost: 8784 });

/** The section `charger` of the bank or of a candidate. */
export const CHARGER = section({
  limit_A: amount({ above: 0, atMost: 100_000 }, { description: 'Default: a fifth of the rated capacity.' }).optional(),
  absorption_V: busVoltage.meta({ description: 'Default: 14.2 V per four cells in series.' }).optional(),
  until: section({
    tail_A: amount(
      { atLeast: 0, atMost: 100_000 },
      { description: 'Bank current below which charging ends; 0 = never. Default: a fiftieth of the rated capacity.' },
    ).optional(),
    tail_hold_s: amount(
      { atLeast: 0, atMost: 86_400 },
      { description: 'How long the current must be below tail_A.', default: 120 },
    ).optional(),
    or_after_h: hours
      .nullable()
      .meta({ description: 'Longest time at absorption; null = no limit.', default: null })
      .optional(),
  }).optional(),
  float_V: busVoltage
    .nullable()
    .meta({ description: 'Held afterwards; null = off. Default: 13.6 V per four cells in series.' })
    .optional(),
  restart: choice(['each-cycle', 'below-voltage'], {
    description: 'When charging begins anew: at the start of each cycle and below restart_V, or below restart_V only.',
    default: 'each-cycle',
  }).optional(),
  restart_V: busVoltage.meta({ description: 'Default: 13.2 V per four cells in series.' }).optional(),
});

export type ChargerInput = z.infer<typeof CHARGER>;

/** Levels per four cells in series [trade practice]. */
const ABSORPTION_V = 14.2;
const FLOAT_V = 13.6;
const RESTART_V = 13.2;

/** Absorption that no lead-acid or wrongly wired charger is taken for, V per cell. */
const CELL_ABSORPTION_V = { least: 3, most: 4 } as const;

/**
 * @param cellsInSeries of the whole bank
 * @param ratedAh of the whole bank
 */
export function defaultCharger(cellsInSeries: number, ratedAh: number): ChargerInput {
  return {
    limit_A: ratedAh / 5,
    absorption_V: (ABSORPTION_V * cellsInSeries) / 4,
    until: { tail_A: ratedAh / 50, tail_hold_s: 120, or_after_h: null },
    float_V: (FLOAT_V * cellsInSeries) / 4,
    restart: 'each-cycle',
    restart_V: (RESTART_V * cellsInSeries) / 4,
  };
}

/** @returns the charger; levels that contradict one another or the cells are faults */
export function resolveCharger(layers: Layers<ChargerInput>, cellsInSeries: number, reading: Reading): ChargerSettings {
  const until = layers.inside('until');
  const charger: ChargerSettings = {
    limitA: layers.si('limit_A', reading),
    absorptionV: layers.si('absorption_V', reading),
    tailA: until.si('tail_A', reading),
    tailHoldS: until.si('tail_hold_s', reading),
    absorptionS: until.siOrNull('or_after_h', reading),
    floatV: layers.siOrNull('float_V', reading),
    restart: layers.setting('restart', reading),
    restartV: layers.si('restart_V', reading),
  };
  checkLevels(charger, layers, cellsInSeries, reading);
  return charger;
}

function checkLevels(
  charger: ChargerSettings,
  layers: Layers<ChargerInput>,
  cellsInSeries: number,
  reading: Reading,
): void {
  const refuse = (key: keyof ChargerInput, rule: string, got: number): void => {
    const { path, source } = layers.pick(key) ?? { path: layers.owner, source: 'default' };
    refuseAt(path, source, rule, got);
  };
  const refuseAt = (path: StudyPath, source: string, rule: string, got: number): void => {
    reading.faultWith(path, `must be ${rule}, got ${got}${source === 'default' ? ' by default' : ''}`);
  };
  const { absorptionV, floatV, restartV, tailA, limitA } = charger;
  const [least, most] = [CELL_ABSORPTION_V.least * cellsInSeries, CELL_ABSORPTION_V.most * cellsInSeries];
  if (!(absorptionV >= least && absorptionV <= most)) {
    refuse('absorption_V', `a number from ${least} to ${most} for ${cellsInSeries} cells in series`, absorptionV);
  } else {
    if (floatV !== null && !(floatV <= absorptionV)) {
      refuse('float_V', `a number at most the absorption voltage, ${absorptionV} V`, floatV);
    }
    if (!(restartV < absorptionV)) {
      refuse('restart_V', `a number below the absorption voltage, ${absorptionV} V`, restartV);
    }
  }
  if (!(tailA < limitA)) {
    const { path, source } = layers.inside('until').pick('tail_A') ?? { path: layers.owner, source: 'default' };
    refuseAt(path, source, `a number below the charger's limit, ${limitA} A`, tailA);
  }
}
