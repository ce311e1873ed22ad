import { describe, expect, it } from 'vitest';
import { BUS_DEAD } from '../../src/bank/bus.js';
import type { ModuleParameters } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { segmentOf } from '../reference/duties.js';
import { plainModule } from '../reference/plain-module.js';
import { runThrough, storyOf } from './journey-of.js';
import { CHARGE, DISCHARGE, oneCell, seconds } from './one-cell.js';

describe('at the edges', () => {
  it('a bank at rest without standby, leakage and bleed stays as it is for a year', () => {
    const { state } = runThrough(oneCell([[segmentOf(8760)]])).kernel;
    expect(state.charge[0]).toBe(0.5);
  });

  it('standby alone empties it as counted', () => {
    // 5 mA for 30 days: 3.6 Ah.
    const { state } = runThrough(oneCell([[segmentOf(720)]], { standbyA: 0.005 })).kernel;
    expect(state.charge[0]).toBeCloseTo(0.5 - 0.036, 10);
  });

  it('a segment of no length changes nothing', () => {
    const { state, nowS } = runThrough(oneCell([[seconds(0, CHARGE), seconds(0, DISCHARGE)]])).kernel;
    expect([state.charge[0], nowS]).toEqual([0.5, 0]);
  });

  it('segments of milliseconds add up', () => {
    const pulses = Array.from({ length: 2000 }, () => seconds(0.005, DISCHARGE));
    const { state, nowS } = runThrough(oneCell([pulses])).kernel;
    expect(nowS).toBeCloseTo(10, 9);
    expect(state.charge[0]).toBeCloseTo(0.5 - 180 / 360_000, 10);
  });

  it('a cell may be driven far beyond full and empty where nothing stops it', () => {
    const over = runThrough(
      oneCell(
        [[segmentOf(10, CHARGE)]],
        {},
        {},
        {
          charger: {
            limitA: 18,
            absorptionV: 99,
            tailA: 0,
            tailHoldS: 60,
            absorptionS: null,
            floatV: null,
            restart: 'each-cycle',
            restartV: 0,
          },
        },
      ),
    );
    expect(over.kernel.state.charge[0]).toBeCloseTo(2.3, 8);
    const under = runThrough(oneCell([[segmentOf(10, DISCHARGE)]]));
    expect(under.kernel.state.charge[0]).toBeCloseTo(-1.3, 8);
  });

  it('all strings blocked under load for a day: a dead bus, not a crash', () => {
    const sketch = { underVoltageV: 3.6, underVoltageReleaseV: 9 };
    const bank = oneCell([[segmentOf(24, { loadW: 20 })]], sketch);
    const { bus, nowS } = runThrough(bank).kernel;
    expect([bus.regime, bus.bankV, nowS]).toEqual([BUS_DEAD, 0, 86_400]);
    expect(storyOf(bank)).toEqual(['2.0 under-voltage-trip', '2.0 load-lost']);
  });

  it('takes resistances a hundred times smaller and larger', () => {
    for (const factor of [1e-2, 1e2]) {
      const module = (id: string, z: number): ModuleParameters =>
        plainModule(id, {
          resistanceOhm: [0.0008, 0.0009].map((ohm) => ohm * factor),
          arrivalCharge: [z, z],
          rest: { pathResistanceOhm: 0.0028 * factor },
        });
      const leads = [1, 2].map(() => ({
        negativeOhm: 0.0005 * factor,
        betweenOhm: 0.0005,
        positiveOhm: 0.0005 * factor,
      }));
      const cycles = [[segmentOf(1, { loadA: 5 }), segmentOf(2), segmentOf(2, { chargeW: 50 })]];
      const bank = bankOf('stiff', { modules: [[module('a', 0.6)], [module('b', 0.55)]], leads, cycles });
      const journey = runThrough(bank);
      const { charge } = journey.kernel.state;
      // 5 Ah out, at most 15 Ah in (100 Wh at some 6.7 V), shared somehow: means of 0.55 and 0.625 with 20 points around.
      expect(charge.every((z) => z > 0.4 && z < 0.75)).toBe(true);
      expect(journey.steps).toBeLessThan(20_000);
    }
  });
});
