import { z } from 'zod';
import { choice } from './amount.js';
import { POPULATION_BMS } from './bms.js';
import { commonCellKeys, POSSIBLE, polarisationMOhm, polarisationPairs } from './cell-model.js';
import { CORRELATIONS } from './correlation.js';
import { GRADES } from './grade-name.js';
import { moduleId } from './names.js';
import { MODULE_RATINGS } from './ratings.js';
import { section } from './section.js';
import { cellSpread, moduleSpread, pointsSpread } from './spread.js';

const MODULES_RULE = 'a list of module names such as [A1, A2], or a mapping of modules written down';

/** A population of one make and age, from which its modules are drawn. */
export const POPULATION = section({
  grade: choice(GRADES, { description: 'Fills in what is not written out.', default: 'new-same-make' }).optional(),
  like: z
    .string('the name of another stock')
    .meta({ description: 'Copies another stock key by key; what is written here wins.' })
    .optional(),
  modules: z.array(moduleId, MODULES_RULE).min(1, MODULES_RULE).max(1000, 'a list of at most 1000 modules'),
  ...commonCellKeys,
  capacity_Ah: cellSpread(POSSIBLE.capacityAh).optional(),
  cell_resistance_mOhm: cellSpread(POSSIBLE.cellResistanceMOhm).optional(),
  polarisation: polarisationPairs(polarisationMOhm).optional(),
  leakage_percent_per_month: cellSpread(POSSIBLE.leakagePercentPerMonth).optional(),
  standby_mA: moduleSpread(POSSIBLE.standbyMA).optional(),
  coulombic_efficiency: cellSpread(POSSIBLE.efficiency).optional(),
  arrival_charge_percent: pointsSpread(POSSIBLE.chargePercent).optional(),
  path_resistance_mOhm: moduleSpread(POSSIBLE.seriesMOhm).optional(),
  joint_resistance_mOhm: moduleSpread(POSSIBLE.seriesMOhm).optional(),
  correlation: CORRELATIONS.optional(),
  bms: POPULATION_BMS.optional(),
  ratings: MODULE_RATINGS.optional(),
});

/** A population as written. */
export type StockInput = z.infer<typeof POPULATION>;
