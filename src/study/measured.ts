import type { z } from 'zod';
import { amount, choice } from './amount.js';
import { filePath } from './file-path.js';
import { QUANTITY_KEYS } from './quantity-keys.js';
import { section } from './section.js';

const uncertainty = Object.fromEntries(
  Object.values(QUANTITY_KEYS).map((key) => [
    key,
    amount(
      { atLeast: 0, atMost: 1e6 },
      { description: 'Standard deviation of the measurement, in the unit of the quantity.', default: 0 },
    ).optional(),
  ]),
);

/** Modules of a stock that were measured. */
export const MEASURED = section({
  file: filePath.meta({
    description:
      'CSV with a column `module` and columns of quantities, called as in a stock (capacity_Ah, standby_mA).',
  }),
  rows: choice(['of-each-module', 'resampled'], {
    description: 'Each module has the row with its name, or gets a row by chance in every sampled bank.',
    default: 'of-each-module',
  }).optional(),
  uncertainty: section(uncertainty)
    .meta({ description: 'How far the measured values may be off, drawn for every sampled bank.' })
    .optional(),
}).meta({ description: 'Measured values in place of nominal value, lot and module deviation of their quantities.' });

export type MeasuredInput = z.infer<typeof MEASURED>;
