import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { hysteresisAfter } from '../../src/simulation/chain-emf.js';
import { updateCellConstants } from '../../src/simulation/kernel.js';
import { runSegment } from '../../src/simulation/run-cycle.js';
import { commitStep, filterAfter, shortenStep, tryStep } from '../../src/simulation/step.js';
import type { DutySegment, ModuleParameters } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { bareModule, noLeads, straightTable } from '../reference/bare-module.js';
import { segmentOf } from '../reference/duties.js';
import { journeyOf } from './journey-of.js';

describe('hysteresisAfter', () => {
  // G. L. Plett, Battery Management Systems vol. 1 (2015), ch. 2, with x = |I gamma dt / Q|.
  it.each([
    [0, -1, -0.632121],
    [1, -2, -0.729329],
    [0.3, 0, 0.3],
    [0, 1, 0.632121],
    [1, 5, 1],
    [-1, -5, -1],
  ])('takes %d with x of %d to %d', (h, x, after) => {
    expect(hysteresisAfter(h, x / 1e-3, 1e-3)).toBeCloseTo(after, 6);
  });

  it('is the same in two halves as in one, and stays between its branches', () => {
    const h = fc.double({ min: -1, max: 1, noNaN: true });
    fc.assert(
      fc.property(h, fc.double({ min: -20, max: 20, noNaN: true }), (start, x) => {
        const whole = hysteresisAfter(start, x, 1);
        expect(hysteresisAfter(hysteresisAfter(start, x / 2, 1), x / 2, 1)).toBeCloseTo(whole, 12);
        expect(Math.abs(whole)).toBeLessThanOrEqual(1);
      }),
      { seed: 101, numRuns: 200 },
    );
  });
});

describe('filterAfter', () => {
  it('is the same in two halves as in one, for constant, ramping and bending currents', () => {
    const random = fc.record({
      tauS: fc.double({ min: 1, max: 3600, noNaN: true }),
      durationS: fc.double({ min: 0.01, max: 1e4, noNaN: true }),
      from: fc.double({ min: -100, max: 100, noNaN: true }),
      first: fc.double({ min: -100, max: 100, noNaN: true }),
      rise: fc.double({ min: -50, max: 50, noNaN: true }),
      bow: fc.double({ min: -50, max: 50, noNaN: true }),
    });
    fc.assert(
      fc.property(random, ({ tauS, durationS, from, first, rise, bow }) => {
        const slope = rise / durationS;
        const bend = bow / durationS ** 2;
        const halfS = durationS / 2;
        const half = filterAfter(tauS, halfS, from, first, slope, bend);
        const whole = filterAfter(tauS, durationS, from, first, slope, bend);
        const middle = first + rise / 2 + bow / 4;
        const inTwo = filterAfter(tauS, halfS, half, middle, slope + 2 * bend * halfS, bend);
        // What cancels is as large as the bend times tau squared.
        expect(Math.abs(inTwo - whole)).toBeLessThan(1e-9 + 1e-14 * Math.abs(bend) * tauS ** 2);
      }),
      { seed: 102, numRuns: 300 },
    );
  });

  it('comes to the closed form', () => {
    // By hand: step of 10 A for 2 tau from 4 A: 10 - 6 exp(-2). Ramp of 1 A/s for long: t - tau. t^2 for long:
    // t^2 - 2 tau t + 2 tau^2.
    expect(filterAfter(50, 100, 4, 10, 0, 0)).toBeCloseTo(10 - 6 * Math.exp(-2), 12);
    expect(filterAfter(5, 500, 0, 0, 1, 0)).toBeCloseTo(495, 9);
    expect(filterAfter(5, 500, 0, 0, 0, 1)).toBeCloseTo(250_000 - 5000 + 50, 6);
  });
});

describe('the step', () => {
  /** Two unlike modules in parallel at the beginning of 100 A. */
  function pairUnderLoad(
    polarisation: ModuleParameters['polarisation'],
    z: readonly [number, number] = [0.95, 0.8],
    slopeV = 2,
    leakageA = 0,
    load: Partial<DutySegment> = { loadA: 100 },
  ) {
    const module = (id: string, ohm: number, charge: number): ModuleParameters =>
      bareModule(id, {
        pathResistanceOhm: ohm,
        arrivalCharge: [charge],
        polarisation,
        leakageA: [id === 'a' ? leakageA : 0],
      });
    const bank = bankOf('pair', {
      modules: [[module('a', 0.01, z[0])], [module('b', 0.014, z[1])]],
      cycles: [],
      ocvTables: [straightTable(12, slopeV)],
      leads: noLeads(2),
    });
    const journey = journeyOf(bank);
    runSegment(journey, segmentOf(0, load), bank);
    return journey;
  }

  /** Charge of the first of the two after an hour in equal steps. */
  function chargeAfterSteps(steps: number, polarisation: ModuleParameters['polarisation'], leakageA = 0): number {
    const { kernel, work } = pairUnderLoad(polarisation, [0.95, 0.8], 2, leakageA);
    for (let step = 0; step < steps; step++) {
      tryStep(kernel, work, 3600 / steps);
      commitStep(kernel, work);
      updateCellConstants(kernel);
    }
    return kernel.state.charge[0];
  }

  it('shortened comes to where a step of that length comes', () => {
    const polarisation = [{ resistanceOhm: [0.002], timeConstantS: 200 }];
    const whole = pairUnderLoad(polarisation);
    tryStep(whole.kernel, whole.work, 100);
    expect(shortenStep(whole.kernel, whole.work, 40)).toBe(true);
    const short = pairUnderLoad(polarisation);
    tryStep(short.kernel, short.work, 40);
    const chargeBelow = 2e-4 * 40 * 100;
    for (const i of [0, 1]) {
      expect(Math.abs(whole.work.endAs[i] - short.work.endAs[i])).toBeLessThan(chargeBelow);
      expect(Math.abs(whole.work.endFilterA[i] - short.work.endFilterA[i])).toBeLessThan(0.05);
      expect(Math.abs(whole.work.lastA[i] - short.work.lastA[i])).toBeLessThan(0.02);
    }
    expect(whole.work.stepS).toBe(40);
    expect(whole.work.endBankA).toBeCloseTo(-100, 9);
    expect(whole.work.endBankV).toBeCloseTo(short.work.endBankV, 3);
    commitStep(whole.kernel, whole.work);
    expect(whole.kernel.nowS).toBe(40);
  });

  it('is of third order: an eighth of the error with half the step', () => {
    // dz falls from 0.15 with tau = 24 mOhm / 2 V x 180000 As = 2160 s towards (I/alpha)(R1 - R2)/2 = -0.1 (closed form as
    // above); z1 = mean + dz / 2, mean = 0.875 - 0.5.
    const dz = -0.1 + 0.25 * Math.exp(-3600 / 2160);
    const exact = 0.375 + dz / 2;
    const errors = [8, 16, 32, 64].map((steps) => Math.abs(chargeAfterSteps(steps, []) - exact));
    for (let k = 1; k < errors.length; k++) {
      const ratio = errors[k - 1] / errors[k];
      expect(ratio).toBeGreaterThan(6.5);
      expect(ratio).toBeLessThan(10.5);
    }
  });

  it('keeps its order with polarisation', () => {
    const pairs = [{ timeConstantS: 1800, resistanceOhm: [0.004] }];
    const fine = chargeAfterSteps(2048, pairs);
    const errors = [8, 16, 32].map((steps) => Math.abs(chargeAfterSteps(steps, pairs) - fine));
    for (let k = 1; k < errors.length; k++) expect(errors[k - 1] / errors[k]).toBeGreaterThan(5.5);
  });

  it('keeps its order while a cell loses charge of itself', () => {
    const fine = chargeAfterSteps(2048, [], 20);
    const errors = [8, 16, 32].map((steps) => Math.abs(chargeAfterSteps(steps, [], 20) - fine));
    for (let k = 1; k < errors.length; k++) expect(errors[k - 1] / errors[k]).toBeGreaterThan(6.5);
  });

  it('keeps its order under a constant power', () => {
    // Half of what the pair can give at all, 6 kW: what the bus voltage gives way to the power counts.
    const chargeAfter = (steps: number): number => {
      const { kernel, work } = pairUnderLoad([], [0.95, 0.8], 2, 0, { loadW: 3000 });
      for (let step = 0; step < steps; step++) {
        tryStep(kernel, work, 800 / steps);
        commitStep(kernel, work);
        updateCellConstants(kernel);
      }
      return kernel.state.charge[0];
    };
    const fine = chargeAfter(1024);
    const errors = [4, 8, 16].map((steps) => Math.abs(chargeAfter(steps) - fine));
    for (let k = 1; k < errors.length; k++) expect(errors[k - 1] / errors[k]).toBeGreaterThan(6.5);
  });

  it('estimates its error: none where the current is constant, an eighth with half the step elsewhere', () => {
    // dz = -0.1 is where the sharing above comes to rest.
    const resting = pairUnderLoad([], [0.7, 0.8]);
    expect(tryStep(resting.kernel, resting.work, 600)).toBeLessThan(1e-6);
    const errorOf = (stepS: number): number => {
      const { kernel, work } = pairUnderLoad([]);
      return tryStep(kernel, work, stepS);
    };
    // From 250 s on the tolerance is one of charge, below that one of charge per second of the step: an eighth, a quarter.
    expect(errorOf(680) / errorOf(340)).toBeGreaterThan(6.5);
    expect(errorOf(680) / errorOf(340)).toBeLessThan(9.5);
    for (const stepS of [120, 60]) {
      expect(errorOf(stepS) / errorOf(stepS / 2)).toBeGreaterThan(3.5);
      expect(errorOf(stepS) / errorOf(stepS / 2)).toBeLessThan(4.5);
    }
  });

  it('is stable where strings share within a fiftieth of the step', () => {
    // As above with 100 times the slope: tau 21.6 s, from 0.15 apart to -0.001. What is left of 0.151 after an explicit
    // step would be thousands of times as much.
    const { kernel, work } = pairUnderLoad([], [0.95, 0.8], 200);
    for (let step = 0; step < 6; step++) {
      tryStep(kernel, work, 1200);
      commitStep(kernel, work);
      updateCellConstants(kernel);
    }
    expect(kernel.state.charge[0] - kernel.state.charge[1]).toBeCloseTo(-0.001, 5);
  });

  it('is stable for polarisation at any length', () => {
    const pairs = [{ timeConstantS: 0.5, resistanceOhm: [0.004] }];
    expect(Math.abs(chargeAfterSteps(2, pairs) - chargeAfterSteps(400, pairs))).toBeLessThan(0.01);
  });
});
