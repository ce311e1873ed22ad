import { z } from 'zod';
import { DEFAULT_AMBIENT_DEGC } from './ambient.js';
import { amount, count } from './amount.js';
import { filePath } from './file-path.js';
import { exactlyOneOf, section } from './section.js';
import { bankSpread } from './spread.js';

const hours = (description: string) => amount({ above: 0, atMost: 8784 }, { description });
const dischargeHours = hours('Length of the phase.');
const chargePower = amount(
  { above: 0, atMost: 1e6 },
  { description: 'Power the charger can give; without it only its own limit counts.' },
).optional();

const peakPower = amount({ above: 0, atMost: 1e6 }, { description: 'Load over the last peak_s seconds of the phase.' });
const peakSeconds = amount({ atLeast: 0.1, atMost: 86_400 }, { description: 'Length of the peak, within the phase.' });
const ambient = amount(
  { atLeast: -60, atMost: 80 },
  {
    description: 'Temperature around the bank, where nothing nearer to it says otherwise.',
    default: DEFAULT_AMBIENT_DEGC,
  },
).optional();

const PHASE_RULE = 'a phase such as {discharge_W: 1000, for_h: 3}, {rest_h: 1} or {charge: to-full, at_most_h: 8}';

/** One phase; which one is told by its first key. */
const PHASE = z.union(
  [
    section({
      discharge_W: amount({ above: 0, atMost: 1e6 }, { description: 'Load of the phase as a power.' }),
      for_h: dischargeHours,
      load_peak_W: peakPower.optional(),
      peak_s: peakSeconds.optional(),
      ambient_degC: ambient,
    }).refine(
      ({ load_peak_W, peak_s }) => (load_peak_W === undefined) === (peak_s === undefined),
      'a phase with both load_peak_W and peak_s, or neither',
    ),
    section({
      discharge_A: amount({ above: 0, atMost: 100_000 }, { description: 'Load of the phase as a current.' }),
      for_h: dischargeHours,
      ambient_degC: ambient,
    }),
    section({ rest_h: hours('Length of a phase without load and charge.'), ambient_degC: ambient }),
    section({
      charge: z.literal('to-full', 'to-full').meta({ description: 'A phase that ends when the charger is done.' }),
      at_most_h: hours('Longest time of that phase.'),
      charge_W: chargePower,
      ambient_degC: ambient,
    }),
    section({
      charge_for_h: hours('Length of a phase of charging, done or not.'),
      charge_W: chargePower,
      ambient_degC: ambient,
    }),
  ],
  PHASE_RULE,
);

export type PhaseInput = z.infer<typeof PHASE>;

const PHASES = z
  .array(PHASE, 'a list of phases')
  .min(1, 'a list of phases')
  .max(10_000, 'a list of at most 10000 phases')
  .meta({ description: 'One cycle as phases in order.' });

/** CSV with the columns time_h, load_W, charge_W and, if wanted, load_peak_W with peak_s, and ambient_degC. */
const PROFILE = filePath.meta({
  description:
    'CSV with the columns time_h (from 0, ascending), load_W and charge_W, constant until the next row; optional: load_peak_W and peak_s, a peak of load at the end of the row, and ambient_degC.',
});

const PART = section({
  name: z
    .string('a name')
    .min(1, 'a name')
    .max(80, 'a name of at most 80 characters')
    .meta({ description: 'Name of the part in messages.' }),
  repeat: count(
    { atLeast: 1, atMost: 10_000 },
    { description: 'Times the part is run before the next.', default: 1 },
  ).optional(),
  profile: PROFILE.optional(),
  phases: PHASES.optional(),
  ambient_degC: ambient,
}).refine(...exactlyOneOf('profile', 'phases'));

const factor = amount({ above: 0, atMost: 100 });

/** The section `duty`: what the bank has to do, again and again up to the horizon. */
export const DUTY = section({
  profile: PROFILE.optional(),
  phases: PHASES.optional(),
  parts: z
    .array(PART, 'a list of parts')
    .min(1, 'a list of parts')
    .max(100, 'a list of at most 100 parts')
    .meta({ description: 'Profiles or phases one after the other, then again from the first.' })
    .optional(),
  cycle_h: amount(
    { atLeast: 0.1, atMost: 8784 },
    { description: 'Length of a cycle of a profile.', default: 24 },
  ).optional(),
  ambient_degC: ambient,
  load_factor: bankSpread(factor).meta({ description: 'Factor on every load of a bank.', default: 1 }).optional(),
  charge_factor: bankSpread(factor)
    .meta({ description: 'Factor on the charging power of a bank.', default: 1 })
    .optional(),
}).refine(...exactlyOneOf('profile', 'phases', 'parts'));

export type DutyInput = z.infer<typeof DUTY>;

export const DEFAULT_CYCLE_H = 24;
