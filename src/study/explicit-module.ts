import type { z } from 'zod';
import { EXPLICIT_AGEING } from './ageing.js';
import { amount } from './amount.js';
import { EXPLICIT_BMS } from './bms.js';
import { cellValues, commonCellKeys, POSSIBLE, polarisationMOhm, polarisationPairs } from './cell-model.js';
import { MODULE_ID, MODULE_ID_RULE } from './names.js';
import { MODULE_RATINGS } from './ratings.js';
import { atMostOneOf, named, section } from './section.js';

const oneLeakage = atMostOneOf('leakage_mA', 'leakage_percent_per_month');

/** A module written down value by value; where cells differ, a list holds one value per cell from the negative end. */
const EXPLICIT_MODULE = section({
  ...commonCellKeys,
  capacity_Ah: cellValues(POSSIBLE.capacityAh)
    .meta({ description: 'Capacity of a cell at 25 degC; every module must have it, here or by the defaults.' })
    .optional(),
  cell_resistance_mOhm: cellValues(POSSIBLE.cellResistanceMOhm).optional(),
  polarisation: polarisationPairs(cellValues(polarisationMOhm)).optional(),
  leakage_percent_per_month: cellValues(POSSIBLE.leakagePercentPerMonth).optional(),
  leakage_mA: cellValues(
    amount(
      { atLeast: 0, atMost: 100_000 },
      { description: 'Self-discharge of a cell at 25 degC as a current, in place of leakage_percent_per_month.' },
    ),
  ).optional(),
  standby_mA: POSSIBLE.standbyMA.optional(),
  coulombic_efficiency: cellValues(POSSIBLE.efficiency).optional(),
  arrival_charge_percent: cellValues(POSSIBLE.chargePercent).optional(),
  path_resistance_mOhm: POSSIBLE.pathMOhm.optional(),
  joint_resistance_mOhm: POSSIBLE.jointMOhm.optional(),
  temperature_offset_K: POSSIBLE.temperatureOffsetK.optional(),
  bms: EXPLICIT_BMS.optional(),
  ratings: MODULE_RATINGS.optional(),
  ageing: EXPLICIT_AGEING.optional(),
}).refine(...oneLeakage);

/** A stock of modules written down; `defaults` holds what they have in common. */
export const EXPLICIT_STOCK = section({
  defaults: EXPLICIT_MODULE.optional(),
  modules: named(MODULE_ID, MODULE_ID_RULE, EXPLICIT_MODULE),
});

export type ExplicitModuleInput = z.infer<typeof EXPLICIT_MODULE>;
export type ExplicitStockInput = z.infer<typeof EXPLICIT_STOCK>;
