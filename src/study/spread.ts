import { z } from 'zod';
import { amount } from './amount.js';
import { atMostOneOf, exactlyOneOf, section } from './section.js';

const amountOf = amount({ atLeast: 0, atMost: 1e6 }, { description: 'In the unit of the quantity.' });
const percentOf = amount({ atLeast: 0, atMost: 1000 }, { description: 'Percent of the nominal value.' });
const sdOrPercent = exactlyOneOf('sd', 'sd_percent');

/** Law of a deviation, mean 0, in the unit of the quantity or in percent of its nominal value. */
const LAW = z.discriminatedUnion(
  'law',
  [
    section({ law: z.literal('fixed') }),
    section({ law: z.literal('normal'), sd: amountOf.optional(), sd_percent: percentOf.optional() }).refine(
      ...sdOrPercent,
    ),
    section({
      law: z.literal('truncated-normal'),
      sd: amountOf.optional(),
      sd_percent: percentOf.optional(),
      half_width: amountOf.optional(),
      half_width_percent: percentOf.optional(),
    })
      .refine(...sdOrPercent)
      .refine(...exactlyOneOf('half_width', 'half_width_percent')),
    section({ law: z.literal('lognormal'), sd: amountOf.optional(), sd_percent: percentOf.optional() }).refine(
      ...sdOrPercent,
    ),
    section({
      law: z.literal('uniform'),
      half_width: amountOf.optional(),
      half_width_percent: percentOf.optional(),
    }).refine(...exactlyOneOf('half_width', 'half_width_percent')),
  ],
  'a law, e.g. {law: lognormal, sd_percent: 15}',
);

export type LawInput = z.infer<typeof LAW>;

const SPREAD_RULE = 'a number, or a mapping such as {nominal: 100, module_sd_percent: 1}';

const lot = { lot: LAW.optional(), lot_sd: amountOf.optional(), lot_sd_percent: percentOf.optional() };
const module = { module: LAW.optional(), module_sd: amountOf.optional(), module_sd_percent: percentOf.optional() };
const cell = { cell: LAW.optional(), cell_sd: amountOf.optional(), cell_sd_percent: percentOf.optional() };
const bank = { bank: LAW.optional(), bank_sd: amountOf.optional(), bank_sd_percent: percentOf.optional() };

const oneLot = atMostOneOf('lot', 'lot_sd', 'lot_sd_percent');
const oneModule = atMostOneOf('module', 'module_sd', 'module_sd_percent');
const oneCell = atMostOneOf('cell', 'cell_sd', 'cell_sd_percent');

/** @returns schema of a quantity that spreads between lots, modules and cells; a number alone has no spread */
export function cellSpread(nominal: z.ZodNumber) {
  const mapping = section({ nominal: nominal.optional(), ...lot, ...module, ...cell });
  return z.union(
    [
      nominal,
      mapping
        .refine(...oneLot)
        .refine(...oneModule)
        .refine(...oneCell),
    ],
    SPREAD_RULE,
  );
}

/** As `cellSpread` for a percentage: its deviations are in points, so that "percent of" cannot be mistaken. */
export function pointsSpread(nominal: z.ZodNumber) {
  const mapping = section({
    nominal: nominal.optional(),
    lot: LAW.optional(),
    lot_sd: amountOf.optional(),
    module: LAW.optional(),
    module_sd: amountOf.optional(),
    cell: LAW.optional(),
    cell_sd: amountOf.optional(),
  });
  return z.union(
    [
      nominal,
      mapping
        .refine(...atMostOneOf('lot', 'lot_sd'))
        .refine(...atMostOneOf('module', 'module_sd'))
        .refine(...atMostOneOf('cell', 'cell_sd')),
    ],
    'a number, or a mapping such as {nominal: 50, module_sd: 3}',
  );
}

/** @returns schema of a quantity that a module has as a whole */
export function moduleSpread(nominal: z.ZodNumber) {
  const mapping = section({ nominal: nominal.optional(), ...lot, ...module });
  return z.union([nominal, mapping.refine(...oneLot).refine(...oneModule)], SPREAD_RULE);
}

/** @returns schema of a factor that a bank has as a whole */
export function bankSpread(nominal: z.ZodNumber) {
  const mapping = section({ nominal: nominal.optional(), ...bank });
  return z.union(
    [nominal, mapping.refine(...atMostOneOf('bank', 'bank_sd', 'bank_sd_percent'))],
    'a number, or a mapping such as {nominal: 1, bank_sd_percent: 5}',
  );
}

/** Any of the spreads above, as written. */
export type SpreadInput = number | SpreadMapping;

export type Level = 'lot' | 'module' | 'cell' | 'bank';

export type SpreadMapping = { readonly nominal?: number | undefined } & {
  readonly [L in Level]?: LawInput | undefined;
} & { readonly [L in Level as `${L}_sd` | `${L}_sd_percent`]?: number | undefined };
