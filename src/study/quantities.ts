/**
 * The quantities of a module that a population spreads, in registry order: the order of correlation matrices and the
 * names of random streams depend on it, so append only and never rename.
 */
export const QUANTITIES = [
  { name: 'capacityAh', levels: ['lot', 'module', 'cell'] },
  { name: 'resistanceOhm', levels: ['lot', 'module', 'cell'] },
  { name: 'leakagePerMonth', levels: ['lot', 'module', 'cell'] },
  { name: 'standbyA', levels: ['lot', 'module'] },
  { name: 'efficiency', levels: ['lot', 'module', 'cell'] },
  { name: 'arrivalCharge', levels: ['lot', 'module', 'cell'] },
  { name: 'pathResistanceOhm', levels: ['lot', 'module'] },
  { name: 'jointResistanceOhm', levels: ['lot', 'module'] },
  { name: 'overVoltageV', levels: ['lot', 'module'] },
  { name: 'overVoltageReleaseV', levels: ['lot', 'module'] },
  { name: 'underVoltageV', levels: ['lot', 'module'] },
  { name: 'underVoltageReleaseV', levels: ['lot', 'module'] },
  { name: 'overCurrentChargeA', levels: ['lot', 'module'] },
  { name: 'overCurrentDischargeA', levels: ['lot', 'module'] },
  { name: 'bleedA', levels: ['lot', 'module'] },
  { name: 'bleedStartV', levels: ['lot', 'module'] },
  { name: 'temperatureOffsetK', levels: ['lot', 'module'] },
  { name: 'ageingRate', levels: ['lot', 'module'] },
  { name: 'refusalBelowK', levels: ['lot', 'module'] },
  { name: 'refusalReleaseK', levels: ['lot', 'module'] },
] as const;

export type QuantityName = (typeof QUANTITIES)[number]['name'];
