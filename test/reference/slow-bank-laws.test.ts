import { describe, expect, it } from 'vitest';
import type { ModuleParameters } from '../../src/study/study.js';
import { bankOf } from './bank-of.js';
import { referenceBanks } from './banks.js';
import { bareModule, noLeads, straightTable } from './bare-module.js';
import { segmentOf } from './duties.js';
import { simulateSlowBank } from './slow-bank.js';

const EXACT = { stepS: 10, nodeLeakS: 0 };

describe('a cell of the slow rewrite', () => {
  /** One module through segments; its states at the given hours. */
  const follow = (module: ModuleParameters, segments: Parameters<typeof segmentOf>[], hours: number[]) => {
    const cycles = [segments.map((segment) => segmentOf(...segment))];
    const ocvTables = [straightTable(3, 0.4)];
    const limitless = { limitA: 1000, absorptionV: 1e5, tailA: 0, tailHoldS: 1, absorptionS: null, floatV: null };
    const charger = { ...limitless, restart: 'each-cycle' as const, restartV: 0 };
    const bank = bankOf('cell', { modules: [[module]], cycles, ocvTables, leads: noLeads(1), charger });
    const run = simulateSlowBank(bank, { ...EXACT, sampleTimesS: hours.map((hour) => 3600 * hour) });
    return run.samples.map(({ modules: [{ chargeFraction, cellV }] }) => ({
      charge: chargeFraction[0],
      aboveOcvV: cellV[0] - 3 - 0.4 * chargeFraction[0],
    }));
  };

  it('follows the one-state hysteresis', () => {
    // G. L. Plett, Battery Management Systems vol. 1 (2015), ch. 2, worked: from 0 with x = |I gamma dt / Q| = 1 of
    // discharge h = exp(-1) - 1; from +1 with x = 2 h = 2 exp(-2) - 1; at rest unchanged. 50 A x 60 / 100 Ah: x = 30 t.
    const module = bareModule('m', { hysteresisV: 1, hysteresisRate: 60, arrivalCharge: [0.2] });
    const discharge = { loadA: 50 };
    const charge = { loadA: 0, chargeW: null };
    const fromZero = follow(module, [[1, discharge]], [1 / 30]);
    expect(fromZero[0].aboveOcvV).toBeCloseTo(-0.632121, 5);
    const h = follow(module, [[0.08, charge], [1 / 15, discharge], [10]], [0.08 + 1 / 15, 10]);
    expect(h[0].aboveOcvV).toBeCloseTo(-0.729329, 5);
    expect(h[1].aboveOcvV).toBeCloseTo(-0.729329, 5);
  });

  it('polarises towards I R and relaxes, and drops I R0 at once', () => {
    // By hand: v(t) = I R (1 - exp(-t / tau)); I = -50 A, R0 1 mOhm, R 2 mOhm, tau 600 s.
    const pairs = [{ timeConstantS: 600, resistanceOhm: [0.002] }];
    const module = bareModule('m', { resistanceOhm: [0.001], polarisation: pairs });
    const v = follow(module, [[0.5, { loadA: 50 }], [1]], [0, 0.25, 0.75]);
    expect(v[0].aboveOcvV).toBeCloseTo(-0.05, 9);
    expect(v[1].aboveOcvV).toBeCloseTo(-0.05 - 0.1 * (1 - Math.exp(-1.5)), 9);
    expect(v[2].aboveOcvV).toBeCloseTo(-0.1 * (1 - Math.exp(-3)) * Math.exp(-1.5), 9);
  });

  it('counts efficiency on charge only, leakage always, and standby before both', () => {
    // By hand, per hour of 100 Ah: charge (0.98 (10 - 0.5) - 0.2) / 100, rest -0.7 / 100, discharge -(10.7) / 100.
    const module = bareModule('m', { efficiency: [0.98], leakageA: [0.2], standbyA: 0.5 });
    const bank = bankOf('count', {
      modules: [[module]],
      cycles: [[segmentOf(1, { chargeW: null })], [segmentOf(1)], [segmentOf(1, { loadA: 10 })]],
      ocvTables: [straightTable(3, 0.4)],
      charger: {
        limitA: 10,
        absorptionV: 100,
        tailA: 0,
        tailHoldS: 1,
        absorptionS: null,
        floatV: null,
        restart: 'each-cycle',
        restartV: 0,
      },
    });
    const z = simulateSlowBank(bank, EXACT).cycleEndCharge.map(([cell]) => cell);
    expect(z[0]).toBeCloseTo(0.5 + (0.98 * 9.5 - 0.2) / 100, 10);
    expect(z[1] - z[0]).toBeCloseTo(-0.007, 10);
    expect(z[2] - z[1]).toBeCloseTo(-0.107, 10);
  });
});

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
    const module = (id: string, q: number, mOhm: number, z: number) =>
      bareModule(id, { capacityAh: [q], pathResistanceOhm: mOhm / 1000, arrivalCharge: [z] });
    const bank = bankOf('pair', {
      modules: [[module('a', q1, r1, 0.9 + dz0)], [module('b', q2, r2, 0.9)]],
      cycles: [[segmentOf(2, { loadA })]],
      ocvTables: [straightTable(12, slopeV)],
      leads: noLeads(2),
    });
    const run = simulateSlowBank(bank, { ...EXACT, sampleTimesS: [3600 * hours] });
    const [first, second] = run.samples[0].modules;
    expect(first.chargeFraction[0] - second.chargeFraction[0]).toBeCloseTo(dz, 8);
    expect(-first.currentA).toBeCloseTo(i1, 6);
  });
});

describe('two strings of two', () => {
  const modules = [
    [bareModule('lower-1', { pathResistanceOhm: 0.012 }), bareModule('upper-1', { pathResistanceOhm: 0.01 })],
    [bareModule('lower-2', { pathResistanceOhm: 0.01 }), bareModule('upper-2', { pathResistanceOhm: 0.012 })],
  ];
  const at100A = (wiring: 'strings' | 'cross-linked', linkOhm: number) => {
    const bank = bankOf('square', {
      modules,
      cycles: [[segmentOf(1, { loadA: 100 })]],
      ocvTables: [straightTable(12, 0.4)],
      leads: noLeads(2),
      wiring,
      linkOhm,
    });
    return simulateSlowBank(bank, { ...EXACT, sampleTimesS: [0] }).samples[0];
  };

  it('carry equal currents at the bus of two strings, 11 mOhm together', () => {
    // By hand: 22 mOhm each; bus 24.4 - 100 x 0.011.
    const { modules: currents, busV } = at100A('strings', 0.001);
    for (const { currentA } of currents) expect(currentA).toBeCloseTo(-50, 9);
    expect(busV).toBeCloseTo(24.4 - 1.1, 9);
  });

  // By hand: by symmetry the 10 mOhm modules carry x and the others 100 - x; around the midpoints
  // 12 (100 - x) - 10 x = r (2 x - 100), so x = (1200 + 100 r) / (22 + 2 r) with r in mOhm.
  it.each([
    [1e-9, 54.545455, 9.090909],
    [0.001, 54.166667, 8.333333],
    [0.01, 52.380952, 4.761905],
    [0.1, 50.45045, 0.900901],
  ])('share by the link when tied by %d Ohm', (linkOhm, largerA, linkA) => {
    const [lower1, upper1, lower2, upper2] = at100A('cross-linked', linkOhm).modules.map((module) => -module.currentA);
    expect(upper1).toBeCloseTo(largerA, 5);
    expect(lower2).toBeCloseTo(largerA, 5);
    expect(upper2).toBeCloseTo(100 - largerA, 5);
    expect(lower1).toBeCloseTo(100 - largerA, 5);
    expect(upper1 - lower1).toBeCloseTo(linkA, 5);
  });
});

describe('currents of the reference banks', () => {
  it('sum to the bank current at every position', () => {
    for (const bank of referenceBanks()) {
      const sampleTimesS = Array.from({ length: 24 }, (_, i) => 900 * i);
      const oneCycle = { ...bank, cycles: bank.cycles.slice(0, 1) };
      const run = simulateSlowBank(oneCycle, { stepS: 60, nodeLeakS: 0, sampleTimesS });
      expect(run.samples.length).toBeGreaterThan(5);
      for (const { modules, bankA } of run.samples) {
        for (const { position } of modules) {
          // Links carry current between strings, hence the sum over strings.
          const sum = modules.filter((m) => m.position === position).reduce((total, m) => total + m.currentA, 0);
          expect(Math.abs(sum - bankA)).toBeLessThan(1e-6);
        }
      }
    }
  });
});
