import type { QuantityName } from '../study/quantities.js';
import type { BmsSettings, ModuleParameters, PopulationStock } from '../study/study.js';
import type { PerQuantity } from './quantity-order.js';
import { spreadValue } from './spread-value.js';

/** Leakage is stated per month of 30 days. */
const HOURS_PER_MONTH = 720;

/**
 * A module of a population from its deviations.
 *
 * - Leakage current of a cell = its rate per month x its own capacity / 720 h.
 * - Polarisation resistances of a cell scale as its series resistance does against the nominal one.
 * - The path of a module holds the BMS path and the joints.
 *
 * @param shared deviations of lot and module together
 * @param cells deviations of each cell from its module, one per cell in series
 */
export function composeModule(
  stock: PopulationStock,
  id: string,
  shared: PerQuantity<number>,
  cells: readonly PerQuantity<number>[],
): ModuleParameters {
  const { quantities, cell } = stock;
  const ofModule = (name: QuantityName): number => spreadValue(quantities[name], shared[name]);
  const ofCells = (name: QuantityName): number[] =>
    cells.map((own) => spreadValue(quantities[name], shared[name] + own[name]));

  const capacityAh = ofCells('capacityAh');
  const resistanceOhm = ofCells('resistanceOhm');
  const nominalOhm = quantities.resistanceOhm.nominal;
  // A cell without series resistance has nothing to scale by.
  const factors = resistanceOhm.map((ohm) => (nominalOhm === 0 ? 1 : ohm / nominalOhm));
  return {
    id,
    stock: stock.key,
    ratedAh: stock.ratedAh,
    ocv: cell.ocv,
    hysteresisV: cell.hysteresisV,
    hysteresisRate: cell.hysteresisRate,
    capacityAh,
    resistanceOhm,
    polarisation: cell.polarisation.map((pair) => ({
      timeConstantS: pair.timeConstantS,
      resistanceOhm: factors.map((factor) => pair.resistanceOhm * factor),
    })),
    leakageA: ofCells('leakagePerMonth').map((rate, index) => (rate * (capacityAh[index] ?? 0)) / HOURS_PER_MONTH),
    efficiency: ofCells('efficiency'),
    arrivalCharge: ofCells('arrivalCharge'),
    pathResistanceOhm: ofModule('pathResistanceOhm') + ofModule('jointResistanceOhm'),
    standbyA: ofModule('standbyA'),
    overVoltageV: ofModule('overVoltageV'),
    overVoltageReleaseV: ofModule('overVoltageReleaseV'),
    underVoltageV: ofModule('underVoltageV'),
    underVoltageReleaseV: ofModule('underVoltageReleaseV'),
    overCurrentChargeA: ofModule('overCurrentChargeA'),
    overCurrentDischargeA: ofModule('overCurrentDischargeA'),
    bleedA: ofModule('bleedA'),
    bleedStartV: ofModule('bleedStartV'),
    bms: withRefusal(stock.bms, ofModule),
    ...(cell.activation !== undefined && { activation: cell.activation }),
    temperatureOffsetK: ofModule('temperatureOffsetK'),
    ...(stock.ageing !== undefined && { ageing: { ...stock.ageing, rate: ofModule('ageingRate') } }),
  };
}

/** The settings of a BMS with the temperatures of refusal of its module, if it refuses at all. */
function withRefusal(bms: BmsSettings, ofModule: (name: QuantityName) => number): BmsSettings {
  if (bms.chargeRefusal === undefined) return bms;
  return { ...bms, chargeRefusal: { belowK: ofModule('refusalBelowK'), releaseK: ofModule('refusalReleaseK') } };
}
