import { z } from 'zod';
import { type About, amount } from './amount.js';
import { section } from './section.js';

/** Cells in series that modules have. */
const CELL_COUNTS = [4, 8, 16] as const;

/** @returns schema of a value that every cell of a module has: one number for all, or one per cell; it means the same */
export function cellValues(range: z.ZodNumber) {
  const list = z.array(range, 'a list with one value per cell').min(1, 'a list with one value per cell');
  return z.union([range, list], 'a number, or a list with one value per cell').meta(range.meta() ?? {});
}

/** Resistance of a polarisation pair, mOhm per cell. */
export const polarisationMOhm = amount(
  { above: 0, atMost: 10_000 },
  { description: 'Resistance of the pair, per cell.' },
);

/** @returns schema of polarisation pairs, their resistance as `leaf` makes it */
export function polarisationPairs<L extends z.ZodType>(leaf: L) {
  return z
    .array(
      section({
        mOhm: leaf,
        tau_s: amount({ above: 0, atMost: 1e7 }, { description: 'Time constant of the pair.' }),
      }),
      'a list of pairs such as {mOhm: 0.4, tau_s: 60}',
    )
    .max(8, 'a list of at most 8 pairs')
    .meta({ description: 'Default: 0.5 and 0.75 of the cell resistance with 60 s and 1800 s.' });
}

const described = (description: string, standard?: About['default']): About =>
  standard === undefined ? { description } : { description, default: standard };

/** What all cells of a module have in common. */
export const commonCellKeys = {
  cells_in_series: z
    .literal([...CELL_COUNTS], 'one of 4, 8, 16')
    .meta({ description: 'Cells of a module.', default: 4 })
    .optional(),
  rated_Ah: amount({ above: 0, atMost: 100_000 }, described('Capacity on the label.')).optional(),
  ocv: z.string('the name of a table under ocv').meta(described('Open-circuit table.', 'default')).optional(),
  hysteresis_mV: amount(
    { atLeast: 0, atMost: 500 },
    described('Half of the gap between the charge and discharge branch.', 7.5),
  ).optional(),
  hysteresis_rate: amount({ atLeast: 0, atMost: 10_000 }, described("Plett's gamma.", 60)).optional(),
  resistance_activation_kJ_per_mol: amount(
    { atLeast: 0, atMost: 100 },
    described('Activation energy of the cell resistances (Arrhenius about 25 degC).', 20),
  ).optional(),
  leakage_activation_kJ_per_mol: amount(
    { atLeast: 0, atMost: 100 },
    described('Activation energy of the leakage (Arrhenius about 25 degC).', 39),
  ).optional(),
};

/** Bounds of what a cell or module can have, shared by populations and modules written down. */
export const POSSIBLE = {
  capacityAh: amount({ above: 0, atMost: 100_000 }, described('Capacity of a cell at 25 degC. Default: by grade.')),
  cellResistanceMOhm: amount(
    { above: 0, atMost: 10_000 },
    described('Ohmic resistance of a cell at 25 degC. Default: by grade, inverse to rated_Ah.'),
  ),
  leakagePercentPerMonth: amount(
    { atLeast: 0, atMost: 100 },
    described('Self-discharge of a cell at 25 degC, of its capacity. Default: by grade.'),
  ),
  standbyMA: amount(
    { atLeast: 0, atMost: 100_000 },
    described('Drawn by the BMS from all cells of its module. Default: by grade.'),
  ),
  efficiency: amount({ above: 0, atMost: 1 }, described('Charge stored of charge taken in. Default: by grade.')),
  chargePercent: amount({ atLeast: 0, atMost: 100 }, described('Charge of a cell when the bank is put together.', 50)),
  pathMOhm: amount(
    { atLeast: 0, atMost: 10_000 },
    described('Switches, shunt and terminals of a module together.', 1.5),
  ),
  jointMOhm: amount(
    { atLeast: 0, atMost: 10_000 },
    described('Joints between the cells of a module together. Default: 1.3 mOhm per four cells.'),
  ),
  temperatureOffsetK: amount(
    { atLeast: -50, atMost: 50 },
    described('By how much a module is warmer than its slot.', 0),
  ),
};

/**
 * Defaults of the cell that no grade changes [own choice].
 *
 * 20 kJ/mol is the middle of 15 to 35 for the cells of a whole module: charge transfer alone is steeper, 33.8 (charge)
 * and 40.9 kJ/mol (discharge) in Electrochim. Acta 60 (2012) 269, ohmic parts are flatter. Leakage: 39 kJ/mol, trade
 * practice, no source.
 */
export const DEFAULT_CELL = {
  cells_in_series: 4,
  ocv: 'default',
  hysteresis_mV: 7.5,
  hysteresis_rate: 60,
  resistance_activation_kJ_per_mol: 20,
  leakage_activation_kJ_per_mol: 39,
  temperature_offset_K: 0,
} as const;

/** Default polarisation pairs as shares of the cell resistance [own choice: 0.4 and 0.6 mOhm beside 0.8 mOhm]. */
export const DEFAULT_POLARISATION = [
  { ofResistance: 0.5, timeConstantS: 60 },
  { ofResistance: 0.75, timeConstantS: 1800 },
] as const;
