import fc from 'fast-check';
import type { DutySegment, ModuleParameters } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { PLAIN_BMS, plainModule } from '../reference/plain-module.js';
import type { ReferenceBank } from '../reference/reference-bank.js';

/** Takes values between bounds from a list of dice, one after the other. */
function drawer(dice: readonly number[]) {
  let next = 0;
  const roll = (): number => dice[next++ % dice.length];
  const between = (low: number, high: number): number => low + (high - low) * roll();
  const one = <T>(...choices: readonly T[]): T =>
    choices[Math.min(choices.length - 1, Math.floor(choices.length * roll()))];
  return { between, one };
}

type Drawer = ReturnType<typeof drawer>;

/** A module of two or three unlike cells, somewhere in its range of charge, with thresholds that get in the way. */
function randomModule({ between, one }: Drawer, id: string, cells: number): ModuleParameters {
  const list = (low: number, high: number): number[] => Array.from({ length: cells }, () => between(low, high));
  const z = between(0.15, 0.9);
  return plainModule(id, {
    capacityAh: list(85, 105),
    resistanceOhm: list(0.0007, 0.0013),
    arrivalCharge: list(z - 0.02, z + 0.02),
    leakageA: list(0, 0.002),
    efficiency: between(0.998, 1),
    rest: {
      standbyA: between(0, 0.03),
      pathResistanceOhm: between(0.002, 0.008),
      overVoltageV: between(3.5, 3.65),
      underVoltageV: between(2.5, 2.9),
      underVoltageReleaseV: between(3, 3.1),
      overCurrentDischargeA: between(40, 120),
      overCurrentChargeA: between(25, 100),
      bleedA: between(0.05, 0.3),
      bleedStartV: between(3.35, 3.5),
    },
    bms: {
      overVoltageDelayS: between(0.5, 5),
      underVoltageReleaseOnCharge: one(false, true),
      overCurrent: { ...PLAIN_BMS.overCurrent, opens: one('path', 'both'), retryS: between(40, 90) },
      forwardDropV: one(0, 0.35, 0.7),
      recloseA: one(null, 0.5, 1),
      bleed: {
        rule: one('each', 'above-lowest', 'none'),
        when: one('charging', 'always'),
        stopBelowStartV: 0.02,
        deltaV: 0.01,
      },
      asleepAfterS: between(1800, 20_000),
    },
  });
}

function randomSegment({ between, one }: Drawer, modules: number): DutySegment {
  return {
    durationS: between(600, 12_000),
    loadW: one(0, 1, 1) * between(10, 160) * modules,
    loadA: one(0, 0, 1) * between(1, 20),
    chargeW: one<number | null>(0, null, between(20, 150) * modules),
    endsWhenCharged: one(false, true),
  };
}

/** A bank of up to 3S3P with a day of load and charge in which protection, bleed and rectifiers act. Invented. */
export function randomBankFrom(dice: readonly number[]): ReferenceBank {
  const drawn = drawer(dice);
  const { between, one } = drawn;
  const wiring = one('strings', 'cross-linked', 'native');
  const [strings, positions, cells] = [one(1, 2, 3), one(1, 2, 3), one(2, 3)];
  const modules = Array.from({ length: strings }, (_, s) =>
    Array.from({ length: positions }, (_, p) => randomModule(drawn, `m${s + 1}-${p + 1}`, cells)),
  );
  const inSeries = cells * positions;
  const absorptionV = between(3.45, 3.62) * inSeries;
  return bankOf('random', {
    modules,
    wiring,
    linkOhm: between(0.0002, 0.005),
    leads: modules.map(() => ({
      negativeOhm: between(0.0002, 0.001),
      betweenOhm: between(0.0002, 0.001),
      positiveOhm: between(0.0002, 0.001),
    })),
    charger: {
      limitA: between(10, 60) * strings,
      absorptionV,
      tailA: one(0, 2, 5) * strings,
      tailHoldS: 120,
      absorptionS: one(null, 1800),
      floatV: one(null, 3.38 * inSeries),
      restart: one('each-cycle', 'below-voltage'),
      restartV: 3.25 * inSeries,
    },
    load: { disconnectV: one(null, 2.95 * inSeries), disconnectDelayS: 10, reconnectV: 3.25 * inSeries },
    cycles: [0, 1].map(() => [0, 1, 2, 3].map(() => randomSegment(drawn, strings * positions * (cells / 4)))),
  });
}

/** Even numbers from 0 to 1. */
export const dice = fc
  .array(fc.noBias(fc.integer({ min: 0, max: 999_999 })), { minLength: 400, maxLength: 400 })
  .map((rolls) => rolls.map((roll) => roll / 1e6));
