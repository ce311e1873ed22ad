import { describe, expect, it } from 'vitest';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { dutyCourse } from '../../src/duty/course.js';
import { driftNow } from '../../src/measures/drift.js';
import { closeAccount } from '../../src/simulation/accountant.js';
import { runCourse } from '../../src/simulation/run-course.js';
import { startBank } from '../../src/simulation/simulate-instance.js';
import type { EqualiserSettings, ModuleParameters } from '../../src/study/study.js';
import { type BankSketch, bankOf } from '../reference/bank-of.js';
import { bareModule, noLeads, straightTable } from '../reference/bare-module.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { studyOf } from '../reference/study-of.js';
import { seconds } from './one-cell.js';

const DEVICE: EqualiserSettings = {
  currentA: 5,
  startV: 0.02,
  fullV: 0.1,
  efficiency: 0.9,
  standbyA: 0,
  enableV: null,
};

/** What became of a bank. */
function runOf(bank: ReferenceBank) {
  const study = studyOf(bank);
  const named = new Map(bank.modules.flat().map((module) => [module.id, module]));
  const parts = { study, candidate: bank.candidate, ocv: compileOcvCurves(bank.ocvTables), toleranceFactor: 1 };
  const { journey, recorder, accountant, visits } = startBank(parts, named);
  runCourse(journey, recorder, dutyCourse(study.duty, study.cycles), bank, undefined, visits);
  const { state, bank: built } = journey.kernel;
  return {
    charge: [...state.charge],
    account: closeAccount(accountant, journey),
    drift: driftNow(built, state),
    journey,
  };
}

/** Two modules of one cell each, U = 3 + z, 10 mOhm, at rest for so many seconds. */
function pairAtRest(
  durationS: number,
  [first, second]: readonly [number, number],
  equaliser: EqualiserSettings,
  sketch: Partial<ModuleParameters> = {},
  bank: Partial<BankSketch> = {},
) {
  const modules = [
    [bareModule('a', { arrivalCharge: [first], ...sketch }), bareModule('b', { arrivalCharge: [second], ...sketch })],
  ];
  return runOf(
    bankOf('pair', {
      modules,
      cycles: [[seconds(durationS)]],
      ocvTables: [straightTable(3, 1)],
      leads: noLeads(1).map((lead) => ({ ...lead, betweenOhm: 0.001 })),
      equaliser,
      ...bank,
    }),
  );
}

describe('an equaliser between two modules at rest', () => {
  it('takes a current that follows its law and the resistance of the modules, and delivers its share', () => {
    // By hand: open-circuit difference 0.08 V; d = 0.08 - 0.01 (1 + 0.9) i and i = 62.5 (d - 0.02), so
    // i = 62.5 x 0.06 / (1 + 62.5 x 0.019) = 1.7143 A. It falls with the difference; over 10 s by 4e-5 of it.
    const { charge } = pairAtRest(10, [0.5, 0.58], DEVICE);
    const amps = (62.5 * 0.06) / (1 + 62.5 * 0.019);
    expect((360_000 * (0.58 - charge[1])) / 10).toBeCloseTo(amps, 3);
    expect((360_000 * (charge[0] - 0.5)) / 10).toBeCloseTo(0.9 * amps, 3);
  });

  it('works the other way round too', () => {
    const [up, down] = [pairAtRest(3600, [0.5, 0.58], DEVICE), pairAtRest(3600, [0.58, 0.5], DEVICE)];
    expect(down.charge[0]).toBeCloseTo(up.charge[1], 9);
    expect(down.charge[1]).toBeCloseTo(up.charge[0], 9);
  });

  it('brings them together exponentially as far as its start', () => {
    // By hand: the excess x = U_b - U_a - 0.02 falls by 1.9 i / 360000 V/s with i = 62.5 x / (1 + 62.5 x 0.019), so
    // tau = 360000 (1 + 1.1875) / (1.9 x 62.5) = 6631.6 s.
    const tauS = (360_000 * (1 + 62.5 * 0.019)) / (1.9 * 62.5);
    for (const durationS of [2000, tauS, 40_000]) {
      const { charge } = pairAtRest(durationS, [0.5, 0.58], DEVICE);
      expect(charge[1] - charge[0]).toBeCloseTo(0.02 + 0.06 * Math.exp(-durationS / tauS), 6);
    }
  });

  it('gives its greatest current beyond the stated difference, then less', () => {
    // By hand: 0.3 V less 0.019 x 5 A leave 0.205 V, beyond 0.1 V until the open-circuit difference is 0.195 V: after
    // 0.105 x 360000 / 9.5 s = 3978.9 s; from there exponentially.
    const limitedS = (0.105 * 360_000) / 9.5;
    const early = pairAtRest(3000, [0.4, 0.7], DEVICE);
    expect(0.7 - early.charge[1]).toBeCloseTo((5 * 3000) / 360_000, 8);
    const tauS = (360_000 * (1 + 62.5 * 0.019)) / (1.9 * 62.5);
    const late = pairAtRest(limitedS + tauS, [0.4, 0.7], DEVICE);
    expect(late.charge[1] - late.charge[0]).toBeCloseTo(0.02 + 0.175 * Math.exp(-1), 5);
  });

  it('does nothing within its start, and draws its standby from both', () => {
    const idle = pairAtRest(3600, [0.5, 0.515], { ...DEVICE, standbyA: 0.1 });
    expect(idle.charge[0]).toBeCloseTo(0.5 - 0.001, 9);
    expect(idle.charge[1]).toBeCloseTo(0.515 - 0.001, 9);
    expect(idle.account.equaliserAh).toBe(0);
    expect(idle.account.equaliserWh).toBeCloseTo(0.1 * (3.5 + 3.515 - 0.001 - 0.002), 4);
  });

  it('waits for the bank voltage that enables it', () => {
    const waiting = pairAtRest(3600, [0.5, 0.58], { ...DEVICE, enableV: 7.2 });
    expect(waiting.charge).toEqual([0.5, 0.58]);
    expect(pairAtRest(3600, [0.5, 0.58], { ...DEVICE, enableV: 7 }).charge[1]).toBeLessThan(0.579);
  });

  it('rests while a path of one of its modules is open', () => {
    const open = pairAtRest(3600, [0.5, 0.58], { ...DEVICE, standbyA: 0.1 }, { overVoltageV: 3.55 }, {});
    // By hand: at work for the 2 s of delay of the over-voltage trip, 1.71 A + 0.1 A.
    expect((0.58 - open.charge[1]) * 360_000).toBeCloseTo(2 * 1.8143, 1);
  });

  it('books what it moved and lost', () => {
    const { charge, account } = pairAtRest(7200, [0.5, 0.58], DEVICE);
    const takenAh = 100 * (0.58 - charge[1]);
    expect(account.equaliserAh).toBeCloseTo(takenAh, 5);
    expect(account.equaliserCounterAh).toBe(0);
    // Law: at rest the modules lose what the device loses, and the heat of their resistances, which is that of the currents.
    expect(account.inWh + account.outWh).toBeLessThan(1e-9);
    const tauS = (360_000 * (1 + 62.5 * 0.019)) / (1.9 * 62.5);
    const peakA = (62.5 * 0.06) / (1 + 62.5 * 0.019);
    const heatWh = (0.01 * 1.81 * peakA ** 2 * (tauS / 2) * (1 - Math.exp((-2 * 7200) / tauS))) / 3600;
    expect(account.equaliserWh).toBeCloseTo(-account.storedGainWh - heatWh, 4);
  });
});
