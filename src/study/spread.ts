import { z } from 'zod';
import { amountOf, LAW, type LawInput, percentOf } from './law.js';
import { atMostOneOf, section } from './section.js';

const SPREAD_RULE = 'a number, or a mapping such as {nominal: 100, module_sd_percent: 1}';

const lot = { lot: LAW.optional(), lot_sd: amountOf.optional(), lot_sd_percent: percentOf.optional() };
const module = { module: LAW.optional(), module_sd: amountOf.optional(), module_sd_percent: percentOf.optional() };
const cell = { cell: LAW.optional(), cell_sd: amountOf.optional(), cell_sd_percent: percentOf.optional() };
const bank = { bank: LAW.optional(), bank_sd: amountOf.optional(), bank_sd_percent: percentOf.optional() };

const oneLot = atMostOneOf('lot', 'lot_sd', 'lot_sd_percent');
const oneModule = atMostOneOf('module', 'module_sd', 'module_sd_percent');
const oneCell = atMostOneOf('cell', 'cell_sd', 'cell_sd_percent');

// What a spread means, and its default, is what its nominal value means: it takes over the `meta` of that.

/** @returns schema of a quantity that spreads between lots, modules and cells; a number alone has no spread */
export function cellSpread(nominal: z.ZodNumber) {
  const mapping = section({ nominal: nominal.optional(), ...lot, ...module, ...cell });
  return z
    .union(
      [
        nominal,
        mapping
          .refine(...oneLot)
          .refine(...oneModule)
          .refine(...oneCell),
      ],
      SPREAD_RULE,
    )
    .meta(nominal.meta() ?? {});
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
  return z
    .union(
      [
        nominal,
        mapping
          .refine(...atMostOneOf('lot', 'lot_sd'))
          .refine(...atMostOneOf('module', 'module_sd'))
          .refine(...atMostOneOf('cell', 'cell_sd')),
      ],
      'a number, or a mapping such as {nominal: 50, module_sd: 3}',
    )
    .meta(nominal.meta() ?? {});
}

/** @returns schema of a quantity that a module has as a whole */
export function moduleSpread(nominal: z.ZodNumber) {
  const mapping = section({ nominal: nominal.optional(), ...lot, ...module });
  return z.union([nominal, mapping.refine(...oneLot).refine(...oneModule)], SPREAD_RULE).meta(nominal.meta() ?? {});
}

/** As `moduleSpread` for a temperature in degC: its deviations are in K, since its zero means nothing. */
export function temperatureSpread(nominal: z.ZodNumber) {
  const mapping = section({
    nominal: nominal.optional(),
    lot: LAW.optional(),
    lot_sd: amountOf.optional(),
    module: LAW.optional(),
    module_sd: amountOf.optional(),
  });
  return z
    .union(
      [nominal, mapping.refine(...atMostOneOf('lot', 'lot_sd')).refine(...atMostOneOf('module', 'module_sd'))],
      'a number, or a mapping such as {nominal: 0, module_sd: 0.5}',
    )
    .meta(nominal.meta() ?? {});
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
