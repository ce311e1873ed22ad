import { describe, expect, it } from 'vitest';
import {
  beginBurstUse,
  createUseRecorder,
  recordUse,
  recordUseLeap,
  useOfCell,
} from '../../src/simulation/use-recorder.js';
import { journeyOf } from './journey-of.js';
import { oneCell } from './one-cell.js';

describe('the use of a cell', () => {
  it('goes on in proportion where switching is leapt over', () => {
    // By hand: 100 s that pass 1800 As into 100 Ah, then three times as much again: 7200 As one way of 2 x 360000 As, at
    // 18 A, that is 0.18 of the capacity per hour; the middle of the step stands at 0.5 + 900 / 360000.
    const journey = journeyOf(oneCell([]));
    const { kernel, work } = journey;
    kernel.chargePerAs[0] = 1 / 360_000;
    work.endAs[0] = 1800;
    const use = createUseRecorder(Float64Array.of(360_000));
    beginBurstUse(use);
    recordUse(use, journey, 100);
    recordUseLeap(use, 3);
    const of = useOfCell(use, 0, kernel.bank, kernel.state.charge);
    expect(of.durationS).toBe(400);
    expect(of.equivalentCycles).toBeCloseTo(0.01, 12);
    expect(of.ratePerH).toBeCloseTo(0.18, 12);
    expect(of.meanCharge).toBeCloseTo(0.5025, 12);
    expect(of.temperatureK).toBeCloseTo(298.15, 9);
    expect(of.depth).toBe(0);
  });

  it('counts no trickle as charging', () => {
    // By hand: 0.9 A are less than a hundredth of 100 Ah per hour, 1.1 A more.
    const rateAt = (amperes: number): number => {
      const journey = journeyOf(oneCell([]));
      journey.work.endAs[0] = 100 * amperes;
      const use = createUseRecorder(Float64Array.of(360_000));
      recordUse(use, journey, 100);
      return useOfCell(use, 0, journey.kernel.bank, journey.kernel.state.charge).ratePerH;
    };
    expect(rateAt(0.9)).toBe(0);
    expect(rateAt(1.1)).toBeCloseTo(0.011, 12);
  });
});
