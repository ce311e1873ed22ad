import type { BmsSettings, ModuleParameters } from '../../src/study/study.js';

/** What may be said of a module instead of the values of a plain one; lists are over cells. */
export interface ModuleSketch {
  readonly capacityAh?: readonly number[];
  readonly resistanceOhm?: readonly number[];
  readonly arrivalCharge?: readonly number[];
  readonly leakageA?: readonly number[];
  readonly efficiency?: number;
  readonly rest?: Partial<ModuleParameters>;
  readonly bms?: Partial<BmsSettings>;
}

/** The BMS of a plain module: every rule on. */
export const PLAIN_BMS: BmsSettings = {
  overVoltageDelayS: 2,
  overVoltageReleaseHoldS: 2,
  underVoltageDelayS: 2,
  underVoltageReleaseHoldS: 60,
  underVoltageReleaseOnCharge: false,
  overCurrent: {
    delayS: 10,
    opens: 'path',
    retryS: 60,
    lockAfterTrips: 5,
    lockWindowS: 3600,
    lock: 'opposite-current',
  },
  forwardDropV: 0.7,
  recloseA: 1,
  recloseDelayS: 0.1,
  bleed: { rule: 'above-lowest', when: 'always', stopBelowStartV: 0.02, deltaV: 0.01 },
  asleepA: 0.0001,
  asleepAfterS: 86_400,
};

/** A 100 Ah module with the package's default cells (four unless a list says otherwise), half full. Invented data. */
export function plainModule(id: string, sketch: ModuleSketch = {}): ModuleParameters {
  const listed = sketch.capacityAh ?? sketch.arrivalCharge ?? sketch.resistanceOhm ?? sketch.leakageA;
  const all = (value: number): number[] => new Array<number>(listed?.length ?? 4).fill(value);
  const resistanceOhm = sketch.resistanceOhm ?? all(0.0008);
  return {
    id,
    stock: 'reference',
    ratedAh: 100,
    ocv: 0,
    hysteresisV: 0.0075,
    hysteresisRate: 60,
    capacityAh: sketch.capacityAh ?? all(100),
    resistanceOhm,
    polarisation: [
      { timeConstantS: 60, resistanceOhm: resistanceOhm.map((ohm) => ohm / 2) },
      { timeConstantS: 1800, resistanceOhm: resistanceOhm.map((ohm) => 0.75 * ohm) },
    ],
    leakageA: sketch.leakageA ?? all(0.0004),
    efficiency: all(sketch.efficiency ?? 0.9998),
    arrivalCharge: sketch.arrivalCharge ?? all(0.5),
    pathResistanceOhm: 0.0028,
    standbyA: 0.005,
    overVoltageV: 3.65,
    overVoltageReleaseV: 3.45,
    underVoltageV: 2.5,
    underVoltageReleaseV: 2.9,
    overCurrentChargeA: 100,
    overCurrentDischargeA: 100,
    bleedA: 0.05,
    bleedStartV: 3.45,
    ...sketch.rest,
    bms: { ...PLAIN_BMS, ...sketch.bms },
  };
}
