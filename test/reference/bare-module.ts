import type { BmsSettings, ModuleParameters, OcvTable } from '../../src/study/study.js';
import { PLAIN_BMS } from './plain-module.js';

/** A voltage that no cell reaches, V, and a current that none carries, A. */
const OUT_OF_REACH = 1e6;

/**
 * A module of one cell reduced to a straight line behind a resistor, without anything that acts or leaks, for closed
 * forms: 100 Ah, no ohms of its own, half full, unless said otherwise.
 */
export function bareModule(
  id: string,
  sketch: Partial<ModuleParameters> = {},
  bms: Partial<BmsSettings> = {},
): ModuleParameters {
  return {
    id,
    stock: 'reference',
    ratedAh: 100,
    ocv: 0,
    hysteresisV: 0,
    hysteresisRate: 0,
    capacityAh: [100],
    resistanceOhm: [0],
    polarisation: [],
    leakageA: [0],
    efficiency: [1],
    arrivalCharge: [0.5],
    pathResistanceOhm: 0.01,
    standbyA: 0,
    overVoltageV: OUT_OF_REACH,
    overVoltageReleaseV: OUT_OF_REACH,
    underVoltageV: -OUT_OF_REACH,
    underVoltageReleaseV: -OUT_OF_REACH,
    overCurrentChargeA: OUT_OF_REACH,
    overCurrentDischargeA: OUT_OF_REACH,
    bleedA: 0,
    bleedStartV: OUT_OF_REACH,
    ...sketch,
    bms: { ...PLAIN_BMS, ...bms },
  };
}

/** A straight open-circuit voltage: `emptyV` at 0, rising by `slopeV` to 1 and beyond. */
export function straightTable(emptyV: number, slopeV: number): OcvTable {
  return {
    interpolation: 'linear',
    chargeFraction: [0, 1],
    voltageV: [emptyV, emptyV + slopeV],
    slopeBelowV: null,
    slopeAboveV: null,
  };
}

/** No leads at all, for as many strings. */
export function noLeads(strings: number) {
  return Array.from({ length: strings }, () => ({ negativeOhm: 0, betweenOhm: 0, positiveOhm: 0 }));
}
