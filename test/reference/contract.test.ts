import { describe, expect, it } from 'vitest';
import {
  type ComparedEvent,
  chargeDifference,
  compareEvents,
  compareWaveforms,
  contractLimits,
  eventToleranceS,
  type ModuleWaveform,
  type Waveform,
} from './contract.js';

/** Three samples of one module; `change` alters it. */
function waveform(change: Partial<ModuleWaveform> = {}, busV: readonly number[] = [13, 13, 13]): Waveform {
  const module: ModuleWaveform = {
    string: 1,
    position: 1,
    cells: 4,
    currentA: [10, 10, 10],
    terminalV: [13, 13, 13],
    lowestCharge: [0.5, 0.5, 0.01],
    highestCharge: [0.5, 0.5, 0.02],
    lowestCellV: [3.2, 3.2, 2.8],
    highestCellV: [3.2, 3.2, 2.8],
    chargeOpen: [false, false, false],
    dischargeOpen: [false, false, false],
    ...change,
  };
  return { timeS: [0, 60, 120], busV, modules: [module] };
}

const limits = contractLimits(50);
const trip: ComparedEvent = { timeS: 60, kind: 'under-voltage-trip', string: 1, position: 1 };
const faultsOf = (actual: Waveform, events: ComparedEvent[] = [], expected = waveform()): readonly string[] =>
  compareWaveforms(actual, expected, limits, events, [0]).faults;

describe('comparing waveforms', () => {
  it('finds no fault between equals', () => {
    expect(faultsOf(waveform())).toEqual([]);
  });

  it('allows 1 % of the largest bank current and no more', () => {
    expect(faultsOf(waveform({ currentA: [10, 10.49, 10] }))).toEqual([]);
    expect(faultsOf(waveform({ currentA: [10, 10.51, 10] }))).toHaveLength(1);
  });

  it('allows 0.001 of charge', () => {
    expect(faultsOf(waveform({ lowestCharge: [0.5, 0.4991, 0.01] }))).toEqual([]);
    expect(faultsOf(waveform({ highestCharge: [0.5, 0.5011, 0.02] }))).toHaveLength(1);
  });

  it('allows 5 mV per cell on the plateau and 20 mV beyond the knees', () => {
    expect(faultsOf(waveform({ highestCellV: [3.2, 3.2049, 2.819] }))).toEqual([]);
    expect(faultsOf(waveform({ highestCellV: [3.2, 3.2051, 2.8] }))).toHaveLength(1);
    expect(faultsOf(waveform({ lowestCellV: [3.2, 3.2, 2.779] }))).toHaveLength(1);
  });

  it('leaves voltages out around an event, and currents within its own tolerance', () => {
    const off = waveform({ highestCellV: [3.2, 3.3, 2.8] });
    expect(faultsOf(off, [{ ...trip, timeS: 66 }])).toEqual([]);
    expect(faultsOf(off, [{ ...trip, timeS: 66.1 }])).toHaveLength(1);
    const jump = waveform({ currentA: [10, 0, 10] });
    expect(faultsOf(jump, [{ ...trip, timeS: 61 }])).toEqual([]);
    expect(faultsOf(jump, [{ ...trip, timeS: 61.1 }])).toHaveLength(1);
  });

  it('compares bus and terminals unless every string is blocked', () => {
    expect(faultsOf(waveform({ terminalV: [13, 13.021, 13] }))).toHaveLength(1);
    expect(faultsOf(waveform({}, [13, 13.1, 13]))).toHaveLength(1);
    const blocked = waveform({ currentA: [0, 0, 0], dischargeOpen: [true, true, true] });
    const other = { ...blocked, busV: [0, 0, 0] };
    expect(faultsOf(other)).not.toEqual([]);
    expect(faultsOf(other, [], blocked)).toEqual([]);
  });

  it('reports what is not a number and what is missing', () => {
    expect(faultsOf(waveform({ currentA: [10, Number.NaN, 10] }))).toHaveLength(1);
    expect(faultsOf({ ...waveform(), timeS: [0, 60] })).not.toHaveLength(0);
  });
});

describe('comparing events', () => {
  it('allows 1 s or 0.02 % of the time since the phase began', () => {
    expect(eventToleranceS(4000, [0])).toBe(1);
    expect(eventToleranceS(10_000, [0])).toBeCloseTo(2, 12);
    expect(eventToleranceS(10_000, [0, 6000])).toBe(1);
    expect(compareEvents([{ ...trip, timeS: 61 }], [trip], [0])).toMatchObject({
      faults: [],
      timeS: 1,
      ofTolerance: 1,
    });
    expect(compareEvents([{ ...trip, timeS: 61.01 }], [trip], [0]).faults).toHaveLength(1);
  });

  it('faults events without a partner in either run', () => {
    expect(compareEvents([], [trip], [0]).faults).toHaveLength(1);
    expect(compareEvents([trip], [], [0]).faults).toHaveLength(1);
    expect(compareEvents([{ ...trip, position: 2 }], [trip], [0]).faults).toHaveLength(2);
    expect(compareEvents([{ ...trip, kind: 'over-voltage-trip' }], [trip], [0]).faults).toHaveLength(2);
  });

  it('matches in order', () => {
    const second = { ...trip, timeS: 600 };
    expect(compareEvents([trip, second], [trip, second], [0]).faults).toEqual([]);
    expect(compareEvents([second, trip], [trip, second], [0]).faults).toHaveLength(2);
  });
});

describe('comparing charge', () => {
  it('gives the largest difference of each cycle', () => {
    const difference = chargeDifference(
      [
        [0.5, 0.6],
        [0.7, 0.8],
      ],
      [
        [0.5, 0.61],
        [0.75, 0.8],
      ],
    );
    expect(difference[0]).toBeCloseTo(0.01, 12);
    expect(difference[1]).toBeCloseTo(0.05, 12);
  });

  it('refuses runs of different length', () => {
    expect(() => chargeDifference([[0.5]], [])).toThrow(RangeError);
    expect(() => chargeDifference([[0.5]], [[0.5, 0.5]])).toThrow(RangeError);
  });
});
