import { z } from 'zod';
import { POPULATION_AGEING } from './ageing.js';
import { choice } from './amount.js';
import { POPULATION_BMS } from './bms.js';
import { commonCellKeys, POSSIBLE, polarisationMOhm, polarisationPairs } from './cell-model.js';
import { CORRELATIONS } from './correlation.js';
import { GRADES } from './grade-name.js';
import { LOTS } from './lots.js';
import { MEASURED } from './measured.js';
import { MODULE_ID, MODULE_ID_RULE, moduleId } from './names.js';
import { MODULE_RATINGS } from './ratings.js';
import { named, section } from './section.js';
import { cellSpread, moduleSpread, pointsSpread } from './spread.js';

const MODULES_RULE = 'a list of module names such as [A1, A2], or a mapping of modules written down';

const DRAWN_AS_RULE = 'a list of 1 to 4 modules from the negative end';

/** A population of one make and age, from which its modules are drawn. */
export const POPULATION = section({
  grade: choice(GRADES, { description: 'Fills in what is not written out.', default: 'new-same-make' }).optional(),
  like: z
    .string('the name of another stock')
    .meta({ description: 'Copies another stock key by key; what is written here wins.' })
    .optional(),
  modules: z
    .array(moduleId, MODULES_RULE)
    .min(1, MODULES_RULE)
    .max(1000, 'a list of at most 1000 modules')
    .meta({ description: 'Names of the modules; a mapping in place of the list writes each of them down.' }),
  ...commonCellKeys,
  capacity_Ah: cellSpread(POSSIBLE.capacityAh).optional(),
  cell_resistance_mOhm: cellSpread(POSSIBLE.cellResistanceMOhm).optional(),
  polarisation: polarisationPairs(polarisationMOhm).optional(),
  leakage_percent_per_month: cellSpread(POSSIBLE.leakagePercentPerMonth).optional(),
  standby_mA: moduleSpread(POSSIBLE.standbyMA).optional(),
  coulombic_efficiency: cellSpread(POSSIBLE.efficiency).optional(),
  arrival_charge_percent: pointsSpread(POSSIBLE.chargePercent).optional(),
  path_resistance_mOhm: moduleSpread(POSSIBLE.pathMOhm).optional(),
  joint_resistance_mOhm: moduleSpread(POSSIBLE.jointMOhm).optional(),
  temperature_offset_K: moduleSpread(POSSIBLE.temperatureOffsetK).optional(),
  correlation: CORRELATIONS.meta({
    description: 'Quantities that go together; replaces the list of the grade (capacity against resistance).',
  }).optional(),
  cells_drawn_as: named(
    MODULE_ID,
    MODULE_ID_RULE,
    z.array(moduleId, DRAWN_AS_RULE).min(1, DRAWN_AS_RULE).max(4, DRAWN_AS_RULE),
  )
    .meta({
      description:
        'For packs compared with smaller modules, by pack: modules whose cell draws its cells take, in order. Lot and module draws stay its own. Without it the cells draw their own.',
    })
    .optional(),
  bms: POPULATION_BMS.optional(),
  lots: LOTS.optional(),
  measured: MEASURED.optional(),
  ratings: MODULE_RATINGS.optional(),
  ageing: POPULATION_AGEING.optional(),
});

/** A population as written. */
export type StockInput = z.infer<typeof POPULATION>;
