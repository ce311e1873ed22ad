import { z } from 'zod';
import { amount } from './amount.js';
import { filePath } from './file-path.js';
import { atMostOneOf, exactlyOneOf, section } from './section.js';

export const amountOf = amount({ atLeast: 0, atMost: 1e6 }, { description: 'In the unit of the quantity.' });
export const percentOf = amount({ atLeast: 0, atMost: 1000 }, { description: 'Percent of the nominal value.' });

const sd = { sd: amountOf.optional(), sd_percent: percentOf.optional() };
const sdOrPercent = exactlyOneOf('sd', 'sd_percent');
const halfWidth = { half_width: amountOf.optional(), half_width_percent: percentOf.optional() };
const halfWidthOrPercent = exactlyOneOf('half_width', 'half_width_percent');
const betaShape = (description: string) => amount({ atLeast: 0.5, atMost: 1000 }, { description });

/** Laws that are made of no others. */
const PLAIN_LAWS = [
  section({ law: z.literal('fixed') }).meta({ description: 'No deviation.' }),
  section({ law: z.literal('normal'), ...sd })
    .refine(...sdOrPercent)
    .meta({ description: 'Bell curve by its standard deviation, cut at 5 of them.' }),
  section({ law: z.literal('truncated-normal'), ...sd, ...halfWidth })
    .refine(...sdOrPercent)
    .refine(...halfWidthOrPercent)
    .meta({ description: 'Bell curve cut at the half width; sd is that before the cut.' }),
  section({ law: z.literal('lognormal'), ...sd })
    .refine(...sdOrPercent)
    .meta({ description: 'Its logarithm is normal: a long tail above, never below 0.' }),
  section({ law: z.literal('uniform'), ...halfWidth })
    .refine(...halfWidthOrPercent)
    .meta({ description: 'All values within the half width equally likely.' }),
  section({
    law: z.literal('triangular'),
    ...halfWidth,
    peak_percent: amount(
      { atLeast: 0, atMost: 100 },
      { description: 'Where the peak lies on the way from the least to the greatest value.', default: 50 },
    ).optional(),
  })
    .refine(...halfWidthOrPercent)
    .meta({ description: 'Straight up to a peak and down again; moved so that its mean is 0.' }),
  section({
    law: z.literal('weibull'),
    shape: amount(
      { atLeast: 0.5, atMost: 100 },
      { description: 'Below 3.6 the long tail lies above, beyond it below; 1 is the exponential law.' },
    ),
    ...sd,
  })
    .refine(...sdOrPercent)
    .meta({ description: 'By shape and standard deviation; moved so that its mean is 0.' }),
  section({
    law: z.literal('beta'),
    alpha: betaShape('First shape; the mean lies at alpha / (alpha + beta) of the range.'),
    beta: betaShape('Second shape.'),
    ...halfWidth,
  })
    .refine(...halfWidthOrPercent)
    .meta({ description: 'Within the half width by two shapes; moved so that its mean is 0.' }),
  section({
    law: z.literal('resampled'),
    file: filePath.meta({ description: 'CSV with one line of column names.' }),
    column: z
      .string('the name of a column')
      .min(1, 'the name of a column')
      .max(200, 'the name of a column')
      .meta({ description: 'Measured values in the unit of the quantity, which ends its name; drawn as they stand.' }),
  }).meta({ description: 'Drawn from a column of measured values.' }),
] as const;

const PLAIN_LAW_RULE = 'a law, e.g. {law: lognormal, sd_percent: 15}';

const MIXTURE_RULE = 'a list of 2 to 20 parts such as [{weight: 95, sd_percent: 1}, {weight: 5, at_percent: -10}]';
const offset = (range: { readonly atLeast: number; readonly atMost: number }, description: string) =>
  amount(range, { description, default: 0 }).optional();

/** A part of a mixture; without a law or a standard deviation it does not spread. */
const MIXED = section({
  weight: amount({ above: 0, atMost: 1e6 }, { description: 'Share of this part, as a ratio to the other weights.' }),
  at: offset({ atLeast: -1e6, atMost: 1e6 }, 'Middle of the part from that of the other parts at 0.'),
  at_percent: offset({ atLeast: -1000, atMost: 1000 }, 'As `at`, in percent of the nominal value.'),
  ...sd,
  law: z
    .discriminatedUnion('law', PLAIN_LAWS, PLAIN_LAW_RULE)
    .meta({ description: 'Any law but a mixture, about the middle of the part.' })
    .optional(),
})
  .refine(...atMostOneOf('at', 'at_percent'))
  .refine(...atMostOneOf('law', 'sd', 'sd_percent'));

/** Law of a deviation, mean 0, in the unit of the quantity or in percent of its nominal value. */
export const LAW = z.discriminatedUnion(
  'law',
  [
    ...PLAIN_LAWS,
    section({
      law: z.literal('mixture'),
      of: z
        .array(MIXED, MIXTURE_RULE)
        .min(2, MIXTURE_RULE)
        .max(20, MIXTURE_RULE)
        .meta({ description: 'Each value comes from one of the parts; the whole is moved so that its mean is 0.' }),
    }).meta({ description: 'From one of several laws by weight.' }),
  ],
  PLAIN_LAW_RULE,
);

export type LawInput = z.infer<typeof LAW>;
export type MixtureInput = Extract<LawInput, { law: 'mixture' }>;
export type MixedInput = MixtureInput['of'][number];
