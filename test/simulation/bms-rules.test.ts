import { describe, expect, it } from 'vitest';
import { runSegment } from '../../src/simulation/run-cycle.js';
import type { DutySegment } from '../../src/study/study.js';
import { PLAIN_BMS } from '../reference/plain-module.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { journeyOf, runThrough, storyOf } from './journey-of.js';
import { CHARGE, DISCHARGE, oneCell, seconds } from './one-cell.js';

/** Bus voltage after each segment of the only cycle. */
function busAfterEach(bank: ReferenceBank): number[] {
  const journey = journeyOf(bank);
  return bank.cycles[0].map((segment: DutySegment) => {
    runSegment(journey, segment, bank);
    return journey.kernel.bus.bankV;
  });
}

describe('over-voltage', () => {
  // Cell on charge: 3.518 + 5e-5 t reaches 3.55 V at 640 s.
  const limits = { overVoltageV: 3.55, overVoltageReleaseV: 3.52 };
  const times = { overVoltageDelayS: 5, overVoltageReleaseHoldS: 3 };

  it('opens the charge path after its delay and closes it after its hold', () => {
    // U stays 3.53225 V after 645 s; from 1200 s on 18 A out bring the cell to 3.51425 V at once.
    const bank = oneCell([[seconds(1200, CHARGE), seconds(60, DISCHARGE)]], limits, times);
    expect(storyOf(bank)).toEqual(['645.0 over-voltage-trip', '1203.0 over-voltage-release']);
    expect(runThrough(bank).kernel.state.charge[0]).toBeCloseTo(0.5 + (18 * (645 - 60)) / 360_000, 6);
  });

  it('begins its delay anew if the voltage falls back in between', () => {
    // 3 s above the threshold, rest, 4 s above it, rest: no trip. Then 5 s.
    const pulses = [seconds(643, CHARGE), seconds(10), seconds(4, CHARGE), seconds(10), seconds(60, CHARGE)];
    expect(storyOf(oneCell([pulses], limits, times))).toEqual(['672.0 over-voltage-trip']);
  });

  it('begins its hold anew if the voltage rises back in between', () => {
    // Trip at 645 s. 2 s of discharge from 700 s, rest at 3.532 V, then 3 s of discharge from 710 s.
    const pulses = [seconds(700, CHARGE), seconds(2, DISCHARGE), seconds(8), seconds(60, DISCHARGE)];
    expect(storyOf(oneCell([pulses], limits, times))).toEqual([
      '645.0 over-voltage-trip',
      '713.0 over-voltage-release',
    ]);
  });

  it('acts at once without delays, and still lets time go on', () => {
    // Trip at 640 s; U 3.532 V is below a release of 3.54 V: open and closed in turn. Each event takes at least 10 ms, so
    // that at most ten fall into 0.1 s; what gets in over a minute lies between nothing and 18 A all the time.
    const none = { overVoltageDelayS: 0, overVoltageReleaseHoldS: 0 };
    const small = { ...limits, overVoltageReleaseV: 3.54 };
    const story = storyOf(oneCell([[seconds(640.1, CHARGE)]], small, none));
    expect(story.slice(0, 2)).toEqual(['640.0 over-voltage-trip', '640.0 over-voltage-release']);
    const [charge] = runThrough(oneCell([[seconds(700, CHARGE)]], small, none)).kernel.state.charge;
    expect(charge).toBeGreaterThanOrEqual(0.532 - 1e-6);
    expect(charge).toBeLessThanOrEqual(0.535 + 1e-6);
    expect(story.length).toBeLessThanOrEqual(11);
  });
});

describe('the forward drop of an open charge path', () => {
  // Tripped at 645 s with U 3.53225 V; the latch holds below. Terminal on discharge: U - 0.18 V, U falling 5e-5 V/s.
  const latched = { overVoltageV: 3.55, overVoltageReleaseV: 1 };
  const times = { overVoltageDelayS: 5, forwardDropV: 0.7, recloseA: 1, recloseDelayS: 0.1 };
  const openV = (dischargedS: number): number => 3.53225 - 5e-5 * dischargedS;

  it('stands for the reclose delay, is bridged while current flows, and comes back when it stops', () => {
    const segments = [
      seconds(700, CHARGE),
      seconds(0.05, DISCHARGE),
      seconds(1, DISCHARGE),
      seconds(10),
      seconds(0.05, DISCHARGE),
    ];
    const [, dropping, bridged, resting, droppingAgain] = busAfterEach(oneCell([segments], latched, times));
    expect(dropping).toBeCloseTo(openV(0.05) - 0.18 - 0.7, 4);
    expect(bridged).toBeCloseTo(openV(1.05) - 0.18, 4);
    // At rest only 1 µS connects the cell.
    expect(Math.abs(resting - openV(1.05))).toBeLessThan(0.71);
    expect(droppingAgain).toBeCloseTo(openV(1.1) - 0.18 - 0.7, 4);
  });

  it('stays below the reclose current, and where there is none', () => {
    for (const recloseA of [20, null]) {
      const segments = [seconds(700, CHARGE), seconds(30, DISCHARGE)];
      const [, dropping] = busAfterEach(oneCell([segments], latched, { ...times, recloseA }));
      expect(dropping).toBeCloseTo(openV(30) - 0.18 - 0.7, 4);
    }
  });

  it('stands against a charger behind an open discharge path too', () => {
    // Discharge: 3.482 - 5e-5 t reaches 3.45 V at 640 s, 2 s of delay: U 3.4679 V; on charge 0.18 V above, 0.7 V before.
    const under = { underVoltageV: 3.45, underVoltageReleaseV: 9 };
    const segments = [seconds(700, DISCHARGE), seconds(0.05, CHARGE), seconds(1, CHARGE)];
    const [dead, dropping, bridged] = busAfterEach(oneCell([segments], under, times));
    expect(dead).toBe(0);
    expect(dropping).toBeCloseTo(3.4679 + 0.18 + 0.7, 4);
    expect(bridged).toBeCloseTo(3.4679 + 5e-5 + 0.18, 4);
  });
});

describe('under-voltage', () => {
  // Cell on discharge: 3.482 - 5e-5 t reaches 3.45 V at 640 s, 2 s of delay: U 3.4679 V.
  it('opens the discharge path, loses the load, and comes back by voltage after its hold', () => {
    // Above the release at once; the load brings the cell to 3.4499 V, 2 s later U 3.4678 V stays below the release.
    const bank = oneCell([[seconds(1200, DISCHARGE)]], { underVoltageV: 3.45, underVoltageReleaseV: 3.46785 });
    expect(storyOf(bank)).toEqual([
      '642.0 under-voltage-trip',
      '642.0 load-lost',
      '702.0 under-voltage-release',
      '702.0 load-back',
      '704.0 under-voltage-trip',
      '704.0 load-lost',
    ]);
  });

  it('is released only by charge current where the BMS asks for it', () => {
    const limits = { underVoltageV: 3.45, underVoltageReleaseV: 3.45 };
    const segments = [seconds(700, DISCHARGE), seconds(300), seconds(300, CHARGE)];
    const story = storyOf(oneCell([segments], limits, { underVoltageReleaseOnCharge: true }));
    expect(story).toEqual([
      '642.0 under-voltage-trip',
      '642.0 load-lost',
      '700.0 load-back',
      '1060.0 under-voltage-release',
    ]);
  });
});

describe('over-current', () => {
  const limits = { overCurrentDischargeA: 10, overCurrentChargeA: 10 };
  const overCurrent = { ...PLAIN_BMS.overCurrent, delayS: 10, retryS: 60, lockAfterTrips: 3, lockWindowS: 3600 };
  const segments = [seconds(600, DISCHARGE), seconds(5, CHARGE)];
  const untilLocked = [
    '10.0 over-current-discharge-trip',
    '10.0 load-lost',
    '70.0 over-current-retry',
    '70.0 load-back',
    '80.0 over-current-discharge-trip',
    '80.0 load-lost',
    '140.0 over-current-retry',
    '140.0 load-back',
    '150.0 over-current-discharge-trip',
    '150.0 over-current-lock',
    '150.0 load-lost',
  ];

  it('trips, tries again, locks, and is released by current the other way', () => {
    const story = storyOf(oneCell([segments], limits, { overCurrent }));
    expect(story.slice(0, -2)).toEqual(untilLocked);
    expect(story.slice(-2).sort()).toEqual(['600.0 load-back', '600.0 over-current-unlock']);
  });

  it('stays locked until a visit where only that unlocks', () => {
    const story = storyOf(oneCell([segments], limits, { overCurrent: { ...overCurrent, lock: 'manual' } }));
    expect(story).toEqual([...untilLocked, '600.0 load-back']);
  });

  it('blocks both ways where it is set so, so that no current can release it', () => {
    const bank = oneCell([segments], limits, { overCurrent: { ...overCurrent, opens: 'both' } });
    expect(storyOf(bank)).toEqual([...untilLocked, '600.0 load-back']);
    // What passes the blocked module stays at microamperes: charge as at the third trip, 30 s of 18 A.
    expect(runThrough(bank).kernel.state.charge[0]).toBeCloseTo(0.5 - (30 * 18) / 360_000, 7);
  });

  it('counts only the trips of the window', () => {
    const story = storyOf(oneCell([segments], limits, { overCurrent: { ...overCurrent, lockWindowS: 100 } }));
    expect(story.filter((line) => line.endsWith('lock'))).toEqual([]);
    expect(story.filter((line) => line.endsWith('trip'))).toHaveLength(9);
  });

  it('guards the charge path alike', () => {
    const story = storyOf(oneCell([[seconds(100, CHARGE)]], limits, { overCurrent }));
    expect(story).toEqual([
      '10.0 over-current-charge-trip',
      '70.0 over-current-retry',
      '80.0 over-current-charge-trip',
    ]);
  });

  it('needs its delay without a break', () => {
    const pulses = [seconds(9, DISCHARGE), seconds(1), seconds(9, DISCHARGE), seconds(1), seconds(9, DISCHARGE)];
    expect(storyOf(oneCell([pulses], limits, { overCurrent }))).toEqual([]);
  });
});

describe('sleep', () => {
  it('comes after its time with the discharge path open', () => {
    // Load of 18 A and 0.5 A of standby from 3.5 V: cell 3.4815 - 18.5 / 360000 t reaches 3.45 V; 2 s of delay. Awake for
    // an hour more, then 0.1 A, over 3 h of rest.
    const sketch = { underVoltageV: 3.45, underVoltageReleaseV: 9, standbyA: 0.5 };
    const tripS = ((3.4815 - 3.45) * 360_000) / 18.5 + 2;
    const bms = { asleepA: 0.1, asleepAfterS: 3600 };
    const { state } = runThrough(oneCell([[seconds(700, DISCHARGE), seconds(10_800)]], sketch, bms)).kernel;
    const drawnAs = 18.5 * tripS + 0.5 * 3600 + 0.1 * (11_500 - tripS - 3600);
    expect(state.asleep[0]).toBe(1);
    expect(state.charge[0]).toBeCloseTo(0.5 - drawnAs / 360_000, 6);
  });
});
