import { z } from 'zod';
import { amount, choice, count } from './amount.js';
import { bleedSection, cellVoltage } from './bleed.js';
import { DEFAULT_CHARGE_REFUSAL, EXPLICIT_CHARGE_REFUSAL, POPULATION_CHARGE_REFUSAL } from './charge-refusal.js';
import { section } from './section.js';
import { moduleSpread } from './spread.js';

const seconds = (standard: number, description: string) =>
  amount({ atLeast: 0, atMost: 86_400 }, { description, default: standard });
const current = (description: string) => amount({ above: 0, atMost: 1e6 }, { description, default: 100 });

const TRIP_DELAY = 'How long a cell must be past the threshold before the path opens.';
const RELEASE_HOLD = 'How long the release must last before the path closes.';

/** Schema of a battery management system, its spread values as `leaf` makes them. */
function bmsSection<L extends z.ZodType, R extends z.ZodType>(leaf: (nominal: z.ZodNumber) => L, chargeRefusal: R) {
  return section({
    over_voltage: section({
      cell_V: leaf(
        cellVoltage('Voltage of any cell above which charging is cut. Default: 3.65 V, spread by grade.'),
      ).optional(),
      release_V: leaf(
        cellVoltage('Voltage that every cell must be below for charging to be allowed again.', 3.45),
      ).optional(),
      delay_s: seconds(2, TRIP_DELAY).optional(),
      release_hold_s: seconds(2, RELEASE_HOLD).optional(),
    }).optional(),
    under_voltage: section({
      cell_V: leaf(
        cellVoltage('Voltage of any cell below which discharging is cut. Default: 2.5 V, spread by grade.'),
      ).optional(),
      release_V: leaf(
        cellVoltage('Voltage that every cell must be above for discharging to be allowed again.', 2.9),
      ).optional(),
      delay_s: seconds(2, TRIP_DELAY).optional(),
      release_hold_s: seconds(60, RELEASE_HOLD).optional(),
      release_on_charge: z
        .boolean('true or false')
        .meta({ description: 'The latch clears only while charge current flows.', default: false })
        .optional(),
    }).optional(),
    over_current: section({
      charge_A: leaf(current('Charge current of a module above which it trips.')).optional(),
      discharge_A: leaf(current('Discharge current of a module above which it trips.')).optional(),
      delay_s: seconds(10, 'How long the current must be above the limit.').optional(),
      opens: choice(['path', 'both'], {
        description: 'What a trip opens: the path of that direction, or both.',
        default: 'path',
      }).optional(),
      retry_s: amount(
        { above: 0, atMost: 86_400 },
        { description: 'Time after which it closes by itself.', default: 60 },
      ).optional(),
      lock_after: count({ atLeast: 1, atMost: 1000 })
        .nullable()
        .meta({ description: 'Trips within the window after which it stays open; null = never.', default: 5 })
        .optional(),
      lock_window_h: amount(
        { above: 0, atMost: 8784 },
        { description: 'Window in which trips count towards lock_after.', default: 1 },
      ).optional(),
      lock: choice(['opposite-current', 'manual'], {
        description: 'What ends the lock: current the other way, or a visit only.',
        default: 'opposite-current',
      }).optional(),
    }).optional(),
    bleed: bleedSection(leaf).optional(),
    forward_drop_V: amount(
      { atLeast: 0, atMost: 10 },
      { description: 'Drop over an open path that conducts its permitted way (body diode).', default: 0.7 },
    ).optional(),
    reclose_A: amount({ atLeast: 0, atMost: 10_000 })
      .nullable()
      .meta({ description: 'Permitted current that removes the forward drop; null = never.', default: 1 })
      .optional(),
    reclose_delay_s: seconds(0.1, 'How long the permitted current must flow before the forward drop goes.').optional(),
    charge_refusal: chargeRefusal.optional(),
    asleep_mA: amount(
      { atLeast: 0, atMost: 10_000 },
      { description: 'Standby while asleep.', default: 0.1 },
    ).optional(),
    asleep_after_h: amount(
      { atLeast: 0, atMost: 8784 },
      { description: 'Time with its discharge path open after which it falls asleep.', default: 24 },
    ).optional(),
  });
}

/** BMS of a population: thresholds, limits and bleed may spread between modules. */
export const POPULATION_BMS = bmsSection(moduleSpread, POPULATION_CHARGE_REFUSAL);
/** BMS of a module written down: every value a number. */
export const EXPLICIT_BMS = bmsSection((nominal) => nominal, EXPLICIT_CHARGE_REFUSAL);

/** What both have in common; a number is a spread of nothing. */
export type BmsInput = z.infer<typeof POPULATION_BMS>;

/**
 * Defaults of every stock [trade practice: levels, delays, limits; own choice: hold times, sleep].
 * Thresholds and their spreads come from the grade.
 */
export const DEFAULT_BMS = {
  over_voltage: { release_V: 3.45, delay_s: 2, release_hold_s: 2 },
  under_voltage: { release_V: 2.9, delay_s: 2, release_hold_s: 60, release_on_charge: false },
  over_current: {
    charge_A: 100,
    discharge_A: 100,
    delay_s: 10,
    opens: 'path',
    retry_s: 60,
    lock_after: 5,
    lock_window_h: 1,
    lock: 'opposite-current',
  },
  bleed: { rule: 'above-lowest', when: 'always', start_V: 3.45, current_mA: 50, delta_mV: 10 },
  forward_drop_V: 0.7,
  reclose_A: 1,
  reclose_delay_s: 0.1,
  charge_refusal: DEFAULT_CHARGE_REFUSAL,
  asleep_mA: 0.1,
  asleep_after_h: 24,
} as const satisfies BmsInput;
