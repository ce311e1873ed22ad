import { describe, expect, it } from 'vitest';
import type { ModuleParameters } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { bareModule, noLeads, straightTable } from '../reference/bare-module.js';
import { segmentOf } from '../reference/duties.js';
import { runThrough } from './journey-of.js';
import { oneCell, seconds } from './one-cell.js';

describe('two batteries in parallel', () => {
  // tau = (R1+R2)/alpha Q1 Q2/(Q1+Q2), dz_inf = (I/alpha)(R1 Q1 - R2 Q2)/(Q1+Q2), I1 = (alpha dz + R2 I)/(R1+R2),
  // derived by hand; Brand et al., J. Power Sources 334 (2016) 202, give the same laws. Columns: Q1, Q2, R1, R2 mOhm,
  // alpha V, I A, first dz, hours, then dz and I1.
  it.each([
    [100, 90, 10, 12, 0.4, 100, 0, 0, 0, 54.54545455],
    [100, 90, 10, 12, 0.4, 100, 0, 1, -0.03355352, 53.93539046],
    [100, 90, 10, 12, 0.4, 100, 0, 1.5, -0.04607592, 53.7077105],
    [100, 100, 10, 12, 0.4, 100, 0, 1, -0.07621402, 53.15974513],
    [100, 100, 10, 10, 0.4, 0, 0.1, 1, 0.067032, 1.34064009],
    [100, 90, 10, 12, 4, 100, 0, 1, -0.0102997, 52.67278156],
  ])('share as the closed form says: %d/%d Ah, %d/%d mOhm, slope %d V, %d A, dz %d, %d h', (...row) => {
    const [q1, q2, r1, r2, slopeV, loadA, dz0, hours, dz, i1] = row;
    const module = (id: string, q: number, mOhm: number, z: number): ModuleParameters =>
      bareModule(id, { capacityAh: [q], pathResistanceOhm: mOhm / 1000, arrivalCharge: [z] });
    const bank = bankOf('pair', {
      modules: [[module('a', q1, r1, 0.9 + dz0)], [module('b', q2, r2, 0.9)]],
      cycles: [[segmentOf(hours, { loadA })]],
      ocvTables: [straightTable(12, slopeV)],
      leads: noLeads(2),
    });
    const { state, bus } = runThrough(bank).kernel;
    // A step may leave 1e-5 of charge; across 20 mOhm that times the slope is a current.
    expect(Math.abs(state.charge[0] - state.charge[1] - dz)).toBeLessThan(1e-5);
    expect(Math.abs(-bus.currentA[0] - i1)).toBeLessThan((1e-5 * slopeV) / 0.02 + 1e-4);
  });
});

describe('a cell', () => {
  const quiet = { pathResistanceOhm: 0.01, resistanceOhm: [0.001] };

  it('follows the one-state hysteresis', () => {
    // G. L. Plett, Battery Management Systems vol. 1 (2015), ch. 2, worked: from 0 with x = |I gamma dt / Q| = 1 of
    // discharge h = exp(-1) - 1; from +1 with x = 2 h = 2 exp(-2) - 1; at rest unchanged. 18 A x 60 / 100 Ah: x = 3e-3 t.
    const sketch = { ...quiet, hysteresisV: 0.0075, hysteresisRate: 60 };
    const h = (...segments: ReturnType<typeof seconds>[]): number =>
      runThrough(oneCell([segments], sketch)).kernel.state.hysteresis[0];
    expect(h(seconds(1000 / 3, { loadA: 18 }))).toBeCloseTo(-0.632121, 6);
    const charged = seconds(10_000, { chargeW: null });
    expect(h(charged, seconds(2000 / 3, { loadA: 18 }))).toBeCloseTo(-0.729329, 5);
    expect(h(charged, seconds(2000 / 3, { loadA: 18 }), seconds(36_000))).toBeCloseTo(-0.729329, 5);
  });

  it('polarises towards I R, relaxes, and drops I R0 at once', () => {
    // By hand: v(t) = I R (1 - exp(-t / tau)); I = -18 A, R0 1 mOhm, path 10 mOhm, R 2 mOhm, tau 600 s.
    const sketch = { ...quiet, polarisation: [{ timeConstantS: 600, resistanceOhm: [0.002] }] };
    // The exponential is integrated: at a hundredth of the stepper's tolerance, to show its law and not its error.
    const busV = (...segments: ReturnType<typeof seconds>[]): number =>
      runThrough(oneCell([segments], sketch), {}, 0.01).kernel.bus.bankV;
    const loaded = 3.5 - 18 * 0.011;
    expect(busV(seconds(0, { loadA: 18 }))).toBeCloseTo(loaded, 7);
    const settling = 0.036 * (1 - Math.exp(-1.5));
    expect(busV(seconds(900, { loadA: 18 }))).toBeCloseTo(loaded - (18 * 900) / 360_000 - settling, 7);
    const left = settling * Math.exp(-2);
    expect(busV(seconds(900, { loadA: 18 }), seconds(1200))).toBeCloseTo(3.5 - (18 * 900) / 360_000 - left, 7);
  });

  it('counts efficiency on charge only, leakage always, and standby before both', () => {
    // By hand, per hour of 100 Ah: charge 0.98 (18 - 0.5) - 0.2, rest -0.7, discharge -18.7.
    const sketch = { ...quiet, efficiency: [0.98], leakageA: [0.2], standbyA: 0.5 };
    const z = (segment: ReturnType<typeof seconds>): number =>
      runThrough(oneCell([[segment]], sketch)).kernel.state.charge[0] - 0.5;
    expect(z(seconds(3600, { chargeW: null }))).toBeCloseTo((0.98 * 17.5 - 0.2) / 100, 9);
    expect(z(seconds(3600))).toBeCloseTo(-0.007, 9);
    expect(z(seconds(3600, { loadA: 18 }))).toBeCloseTo(-0.187, 9);
  });

  it('charges at less than its standby without loss of efficiency', () => {
    // By hand: 0.3 A in, 0.5 A drawn: -0.2 A, though the terminal charges.
    const sketch = { ...quiet, efficiency: [0.9], standbyA: 0.5 };
    const charger = {
      limitA: 0.3,
      absorptionV: 9,
      tailA: 0,
      tailHoldS: 60,
      absorptionS: null,
      floatV: null,
      restart: 'each-cycle',
      restartV: 0,
    } as const;
    const { state } = runThrough(oneCell([[seconds(3600, { chargeW: null })]], sketch, {}, { charger })).kernel;
    expect(state.charge[0]).toBeCloseTo(0.498, 9);
  });
});
