import { describe, expect, it } from 'vitest';
import type { BmsSettings, DutySegment } from '../../src/study/study.js';
import { bankOf } from './bank-of.js';
import { bareModule, straightTable } from './bare-module.js';
import { CHARGER, minutes, runOne, story } from './one-cell.js';
import { PLAIN_BMS } from './plain-module.js';
import { simulateSlowBank } from './slow-bank.js';

describe('the voltage rules', () => {
  it('open the charge path after the delay and close it after the hold', () => {
    // Cell: 3.536 + 1e-4 t reaches 3.6 at 640 s, 5 s of delay; U stays 3.5645. From 1200 s on 36 A out: 3.5285 at once
    // below the release, 3 s of hold.
    const run = runOne(
      [[minutes(20, { chargeW: null }), minutes(10, { loadA: 36 })]],
      { overVoltageV: 3.6, overVoltageReleaseV: 3.55 },
      { overVoltageDelayS: 5, overVoltageReleaseHoldS: 3 },
      {},
      [1000, 1200.05, 1201, 1204],
    );
    expect(story(run)).toEqual(['645.00 over-voltage-trip', '1203.00 over-voltage-release']);
    expect(run.events[0]).toMatchObject({ cycle: 1, string: 1, position: 1, cell: 1 });
    const [refusing, dropping, reclosed, closed] = run.samples;
    expect(Math.abs(refusing.bankA)).toBeLessThan(1e-5);
    expect(refusing.busV).toBe(4.2);
    // The drop of 0.7 V stays for 0.1 s above 1 A; 396 mV are ohmic.
    const terminalV = (timeS: number): number => 3.5645 - 1e-4 * (timeS - 1200) - 0.396;
    expect(dropping.busV).toBeCloseTo(terminalV(1200.05) - 0.7, 6);
    expect(reclosed.busV).toBeCloseTo(terminalV(1201), 6);
    expect(closed.busV).toBeCloseTo(terminalV(1204), 6);
  });

  it('open the discharge path, lose the load and come back by voltage', () => {
    // 3.464 - 1e-4 t reaches 3.4 at 640 s, 2 s of delay; then U is 3.4358, above the release at once, 60 s of hold;
    // with the load the cell is at 3.3998 and trips again after the delay, now for good (U 3.4356 below 3.4357).
    const run = runOne([[minutes(20, { loadA: 36 })]], {
      underVoltageV: 3.4,
      underVoltageReleaseV: 3.4357,
    });
    expect(story(run)).toEqual([
      '642.00 under-voltage-trip',
      '642.00 load-lost',
      '702.00 under-voltage-release',
      '702.00 load-back',
      '704.00 under-voltage-trip',
      '704.00 load-lost',
    ]);
    expect(run.lostAh).toBeCloseTo((36 * (1200 - 644)) / 3600, 4);
  });

  it('release under-voltage only while charging where asked to', () => {
    const run = runOne(
      [[minutes(15, { loadA: 36 }), minutes(5), minutes(5, { chargeW: null })]],
      { underVoltageV: 3.4, underVoltageReleaseV: 3.4 },
      { underVoltageReleaseOnCharge: true },
      {},
      [1000],
    );
    expect(story(run)).toEqual([
      '642.00 under-voltage-trip',
      '642.00 load-lost',
      '900.00 load-back',
      '1260.00 under-voltage-release',
    ]);
    expect(Math.abs(run.samples[0].bankA)).toBeLessThan(1e-5);
  });

  it('hold the bus at 0 V while a load waits for blocked strings', () => {
    const run = runOne([[minutes(15, { loadW: 100 })]], { underVoltageV: 3.49 }, {}, {}, [800]);
    expect(run.samples[0].busV).toBe(0);
    expect(run.servedWh + run.lostWh).toBeCloseTo(25, 9);
  });
});

describe('the over-current rules', () => {
  const overCurrent = { ...PLAIN_BMS.overCurrent, lockAfterTrips: 3 };
  const cycles = [[minutes(10, { loadA: 60 }), minutes(10, { chargeW: null })]];
  const sketch = { overCurrentDischargeA: 50 };
  const trips = [
    '10.00 over-current-discharge-trip',
    '10.00 load-lost',
    '70.00 over-current-retry',
    '70.00 load-back',
    '80.00 over-current-discharge-trip',
    '80.00 load-lost',
    '140.00 over-current-retry',
    '140.00 load-back',
    '150.00 over-current-discharge-trip',
    '150.00 over-current-lock',
    '150.00 load-lost',
    '600.00 load-back',
  ];

  it('trip, retry and lock until current flows the other way', () => {
    expect(story(runOne(cycles, sketch, { overCurrent }))).toEqual([
      ...trips.slice(0, -1),
      '600.00 over-current-retry',
      '600.00 load-back',
    ]);
  });

  it('stay locked where only a visit unlocks', () => {
    expect(story(runOne(cycles, sketch, { overCurrent: { ...overCurrent, lock: 'manual' } }))).toEqual(trips);
  });

  it('block both ways where asked to, so that no current can unlock', () => {
    const run = runOne(cycles, sketch, { overCurrent: { ...overCurrent, opens: 'both' } }, {}, [900]);
    expect(story(run)).toEqual(trips);
    expect(run.samples[0].modules[0]).toMatchObject({ chargeOpen: true, dischargeOpen: true });
  });

  it('count only trips within the window', () => {
    const run = runOne(cycles, sketch, { overCurrent: { ...overCurrent, lockWindowS: 100 } });
    expect(run.events.some((event) => event.kind === 'over-current-lock')).toBe(false);
  });

  it('guard the charge path alike', () => {
    const run = runOne([[minutes(2, { chargeW: null })]], { overCurrentChargeA: 30 }, { overCurrent });
    expect(story(run)).toEqual([
      '10.00 over-current-charge-trip',
      '70.00 over-current-retry',
      '80.00 over-current-charge-trip',
    ]);
  });
});

describe('bleed and standby', () => {
  const pair = { capacityAh: [100, 100], resistanceOhm: [0, 0], leakageA: [0, 0], efficiency: [1, 1] };
  const bleeding = (z: number[], bleed: Partial<BmsSettings['bleed']>, segments: DutySegment[]): readonly number[] => {
    const sketch = { ...pair, arrivalCharge: z, bleedA: 1, bleedStartV: 3.5 };
    const charger = { ...CHARGER, limitA: 2, absorptionV: 8.4 };
    const run = runOne([segments], sketch, { bleed: { ...PLAIN_BMS.bleed, ...bleed } }, { charger });
    return run.cycleEndCharge[0];
  };

  it('draws from each cell above the start, down to the stop', () => {
    // 1 A for 1 h from 0.6; from 0.51 down to 3.48 V; nothing from 0.49.
    expect(bleeding([0.6, 0.49], { rule: 'each' }, [minutes(60)])[0]).toBeCloseTo(0.59, 8);
    expect(bleeding([0.51, 0.49], { rule: 'each' }, [minutes(300)])[0]).toBeCloseTo(0.48, 6);
    expect(bleeding([0.51, 0.49], { rule: 'each' }, [minutes(300)])[1]).toBeCloseTo(0.49, 8);
  });

  it('draws only from cells above the lowest, until half the difference is left', () => {
    // 0.60 and 0.58: a difference of 20 mV, above 10; it ends at 5 mV.
    const z = bleeding([0.6, 0.58], { rule: 'above-lowest' }, [minutes(300)]);
    expect(z[0]).toBeCloseTo(0.585, 6);
    expect(z[1]).toBeCloseTo(0.58, 8);
  });

  it('draws only while charging where asked to', () => {
    const when = { rule: 'each', when: 'charging' } as const;
    expect(bleeding([0.6, 0.6], when, [minutes(60)])[0]).toBeCloseTo(0.6, 8);
    expect(bleeding([0.6, 0.6], when, [minutes(60, { chargeW: null })])[0]).toBeCloseTo(0.61, 8);
  });

  it('gives way to the settings of a candidate', () => {
    const bank = { bleed: { rule: 'each', currentA: 2, startV: 3.4 } } as const;
    const run = runOne([[minutes(60)]], { bleedA: 1, bleedStartV: 3.6 }, {}, bank);
    expect(run.cycleEndCharge[0][0]).toBeCloseTo(0.48, 8);
  });

  it('puts a BMS to sleep some time after its discharge path opened', () => {
    // Awake 0.5 A until an hour after the trip, then 0.1 A; cycles 2 and 3 are 3 h of rest from 300 s on.
    const sketch = { underVoltageV: 3.45, standbyA: 0.5, underVoltageReleaseV: 3.6 };
    const cycles = [[minutes(5, { loadA: 36 })], [minutes(120)], [minutes(60)]];
    const run = runOne(cycles, sketch, { asleepA: 0.1, asleepAfterS: 3600 });
    const awakeS = run.events[0].timeS + 3600 - 300;
    const [atRest, , atEnd] = run.cycleEndCharge.map(([z]) => z);
    expect(atRest - atEnd).toBeCloseTo((0.5 * awakeS + 0.1 * (10_800 - awakeS)) / 360_000, 8);
  });
});

describe('native wiring', () => {
  it('puts the cells of a string under the BMS and path of position 1', () => {
    const lower = bareModule('lower', { overVoltageV: 3.6, overVoltageReleaseV: 3.5, arrivalCharge: [0.5] });
    const upper = bareModule('upper', { overVoltageV: 3.55, pathResistanceOhm: 0.5, arrivalCharge: [0.52] });
    const run = simulateSlowBank(
      bankOf('native', {
        modules: [[lower, upper]],
        wiring: 'native',
        cycles: [[minutes(20, { chargeW: null })]],
        ocvTables: [straightTable(3, 1)],
        leads: [{ negativeOhm: 0.001, betweenOhm: 1, positiveOhm: 0.002 }],
        charger: { ...CHARGER, absorptionV: 8.4 },
      }),
      { stepS: 5, nodeLeakS: 0, sampleTimesS: [0] },
    );
    // By hand: 3.5 + 3.52 + 36 x 13 mOhm; the second cell reaches 3.6 V after 800 s, 2 s of delay.
    expect(run.samples[0].busV).toBeCloseTo(7.02 + 0.468, 9);
    expect(story(run)).toEqual(['802.00 over-voltage-trip']);
    expect(run.events[0]).toMatchObject({ string: 1, position: 1, cell: 2 });
  });
});
