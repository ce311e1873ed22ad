import { describe, expect, it } from 'vitest';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { dutyCourse } from '../../src/duty/course.js';
import type { CycleLog } from '../../src/measures/cycle-log.js';
import { runCourse } from '../../src/simulation/run-course.js';
import { startBank } from '../../src/simulation/simulate-instance.js';
import { bareModule, noLeads } from '../reference/bare-module.js';
import { PLAIN_BMS } from '../reference/plain-module.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { studyOf } from '../reference/study-of.js';
import { BENCH, CHARGE, DISCHARGE, oneCell, seconds } from './one-cell.js';

/** Log of a bank's course. */
function logOf(bank: ReferenceBank): CycleLog {
  const study = studyOf(bank);
  const named = new Map(bank.modules.flat().map((module) => [module.id, module]));
  const parts = { study, candidate: bank.candidate, ocv: compileOcvCurves(bank.ocvTables), toleranceFactor: 1 };
  const { journey, recorder } = startBank(parts, named);
  runCourse(journey, recorder, dutyCourse(study.duty, study.cycles), bank);
  return recorder.log;
}

/** Wh of 18 A over some seconds at the nominal 3.2 V of a cell. */
const wattHours = (lostS: number): number => (18 * 3.2 * lostS) / 3600;

describe('the record of lost load', () => {
  // Under-voltage at 642 s (3.482 - 5e-5 t reaches 3.45 V at 640 s, 2 s of delay), for good.
  const under = { underVoltageV: 3.45, underVoltageReleaseV: 9 };

  it('has the cycle, the energy and the charge left behind', () => {
    const log = logOf(oneCell([[seconds(600, DISCHARGE)], [seconds(600, DISCHARGE)], [seconds(600)]], under));
    expect([...log.loadLost]).toEqual([0, 1, 0]);
    expect([...log.dischargeCutoff]).toEqual([0, 1, 0]);
    expect([...log.dischargeCutoffByVoltage]).toEqual([0, 1, 0]);
    expect([...log.stringLost]).toEqual([0, 0, 0]);
    expect([...log.trips]).toEqual([0, 1, 0]);
    expect(log.lostWh[1]).toBeCloseTo(wattHours(558), 3);
    expect(log.chargeLeftAh[1]).toBeCloseTo(46.79, 3);
    expect(log.firstOnDischarge).toEqual({ cycle: 2, string: 1, position: 1, cell: 1 });
    expect(log.elapsedS).toBe(1800);
  });

  it('takes a power at its watts', () => {
    // Dead from the start but for the delay of 2 s: 100 W for the rest of 10 minutes.
    const log = logOf(oneCell([[seconds(600, { loadW: 100 })]], { ...under, underVoltageV: 3.6 }));
    expect(log.lostWh[0]).toBeCloseTo((100 * 598) / 3600, 3);
  });

  it('notices only what lasts longer than a second', () => {
    // 18 A above 10 A: off after 10 s, again and again.
    const retrying = (retryS: number): CycleLog => {
      const overCurrent = { ...PLAIN_BMS.overCurrent, delayS: 10, retryS, lockAfterTrips: null };
      return logOf(oneCell([[seconds(100, DISCHARGE)]], { overCurrentDischargeA: 10 }, { overCurrent }));
    };
    // Nine times 10.5 s, eight times 11.5 s.
    const short = retrying(0.5);
    expect([short.loadLost[0], short.overCurrentTrips]).toEqual([0, 9]);
    expect(short.lostWh[0]).toBeCloseTo(wattHours(9 * 0.5), 6);
    const long = retrying(1.5);
    expect([long.loadLost[0], long.overCurrentTrips]).toEqual([1, 8]);
    expect(long.dischargeCutoffByCurrent[0]).toBe(1);
  });

  it('includes the low-voltage disconnect, which is no cutoff', () => {
    // Terminal 3.32 - 5e-5 t reaches 3.3 V at 400 s, 10 s more.
    const load = { disconnectV: 3.3, disconnectDelayS: 10, reconnectV: 9 };
    const log = logOf(oneCell([[seconds(600, DISCHARGE)]], {}, {}, { load }));
    expect([log.loadLost[0], log.dischargeCutoff[0]]).toEqual([1, 0]);
    expect(log.lostWh[0]).toBeCloseTo(wattHours(190), 3);
  });

  it('counts no cutoff when the cycle has no load left to serve', () => {
    const log = logOf(oneCell([[seconds(10, DISCHARGE), seconds(3600)]], { ...under, standbyA: 18 }));
    expect([log.underVoltageTrips, log.dischargeCutoff[0], log.loadLost[0]]).toEqual([1, 0, 0]);
  });
});

describe('the record of a string lost', () => {
  it('has the cycle in which the other string serves on', () => {
    // 9 A each; the second is off after 10 s for a minute.
    const module = (id: string, overCurrentDischargeA: number) =>
      bareModule(id, { overCurrentDischargeA }, { overCurrent: { ...PLAIN_BMS.overCurrent, lockAfterTrips: 1 } });
    const modules = [[module('a', 100)], [module('b', 5)]];
    const bank = oneCell([[seconds(60, DISCHARGE)], [seconds(60)]], {}, {}, { modules, leads: noLeads(2) });
    const log = logOf({ ...bank, candidate: { ...bank.candidate, strings: [['a'], ['b']] } });
    expect([...log.stringLost]).toEqual([1, 0]);
    expect([...log.loadLost]).toEqual([0, 0]);
    expect(log.firstOnDischarge).toEqual({ cycle: 1, string: 2, position: 1, cell: 0 });
  });
});

describe('the record of charge', () => {
  // Over-voltage at 645 s with z = 0.53225.
  const over = { overVoltageV: 3.55, overVoltageReleaseV: 3 };
  const times = { overVoltageDelayS: 5 };

  it('has an early cutoff with what is missing at the moment of greatest charge', () => {
    const log = logOf(oneCell([[seconds(900, CHARGE), seconds(60, DISCHARGE)]], over, times));
    expect([log.chargeCutoff[0], log.chargeCutoffByVoltage[0]]).toEqual([7, 1]);
    expect(log.firstOnCharge).toEqual({ cycle: 1, string: 1, position: 1, cell: 1 });
    expect(log.chargeMissedAh[0]).toBeCloseTo(46.775, 3);
    expect(log.endedByBms[0]).toBe(0);
  });

  it('marks a charge that ended because every charge path was open', () => {
    const charger = { ...BENCH, absorptionV: 3.8, tailA: 6 };
    const log = logOf(oneCell([[seconds(900, CHARGE)]], over, times, { charger }));
    expect([log.endedByBms[0], log.chargeCutoff[0]]).toEqual([1, 7]);
  });

  it('takes no cutoff for early once the dwell of the tail has begun', () => {
    // Bus 3.68 + 5e-5 t is within 0.5 % of 3.72 V from 428 s on, with less than 30 A: 1000 s of dwell.
    const charger = { ...BENCH, absorptionV: 3.72, tailA: 30, tailHoldS: 1000 };
    const log = logOf(oneCell([[seconds(900, CHARGE)]], over, times, { charger }));
    expect([log.overVoltageTrips, log.chargeCutoff[0]]).toEqual([1, 0]);
  });

  it('measures margins by the module furthest from full', () => {
    // 3 points below full at 3.97 V + 18 mV; 640 s before that at 94 %: only the first margin.
    const near = { arrivalCharge: [0.938], overVoltageV: 3.988, overVoltageReleaseV: 3 };
    const log = logOf(oneCell([[seconds(900, CHARGE)]], near, { overVoltageDelayS: 0 }));
    expect([log.chargeCutoff[0], log.firstOnCharge]).toEqual([1, null]);
  });
});
