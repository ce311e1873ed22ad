import { describe, expect, it } from 'vitest';
import { meanEstimate } from '../../src/statistics/mean-estimate.js';
import { summariseMoments } from '../../src/statistics/moments.js';
import { runStudy } from './run-study.js';

/** Two 24 V strings as received, charged to full every day with unlike absorption voltages. */
const { low, middle, high } = runStudy(`motleybank: 1
seed: 3
instances: 32
cycles: 60
stock:
  house: {grade: new-same-make, rated_Ah: 100, modules: [A1, A2, B1, B2]}
duty: {phases: [{discharge_W: 500, for_h: 6.4}, {rest_h: 5}, {charge: to-full, at_most_h: 10}, {rest_h: 5}]}
candidates:
  low: {wiring: strings, modules: [[A1, A2], [B1, B2]], charger: {absorption_V: 27.2, float_V: 27.0}}
  middle: {wiring: strings, modules: [[A1, A2], [B1, B2]], charger: {absorption_V: 27.8}}
  high: {wiring: strings, modules: [[A1, A2], [B1, B2]], charger: {absorption_V: 28.8}}
`);

const tripsOf = (run: typeof low) => run?.values('over_voltage_trips') ?? new Float64Array();
const meanOf = (run: typeof low, column: string) => summariseMoments(run?.values(column) ?? new Float64Array()).mean;

describe('a higher absorption voltage', () => {
  it('of 27.2 V never trips a BMS, and the drift on arrival stays', () => {
    // By hand: with one cell at 3.65 V, 27.2 V leave 3.364 V to the others, where no cell is nearly full; and no cell
    // reaches the 3.45 V from which one bleeds. What is left of the drift changes by standby and leakage alone.
    expect(tripsOf(low).every((trips) => trips === 0)).toBe(true);
    const [arrived, stayed] = [meanOf(low, 'drift_at_cycle_1'), meanOf(low, 'drift_at_cycle_60')];
    expect(arrived).toBeGreaterThan(2);
    expect(Math.abs(stayed / arrived - 1)).toBeLessThan(0.1);
  });

  it('of 27.8 V trips one about every 20 cycles', () => {
    // Figure of an independent prototype, "about 0.05" per cycle: the interval of the mean must hold it.
    const { lower, upper } = meanEstimate(tripsOf(middle), 0.95);
    expect(lower ?? Number.NaN).toBeLessThan(0.05);
    expect(upper ?? Number.NaN).toBeGreaterThan(0.05);
    expect(meanOf(middle, 'over_voltage_trips')).toBeLessThan(0.1);
  });

  it('of 28.8 V trips one to two at every charge, at most one in each string', () => {
    // Common practice, no source: near full one module of a pair stops its string.
    expect(meanOf(high, 'over_voltage_trips')).toBeGreaterThan(1);
    expect(Math.max(...tripsOf(high))).toBeLessThanOrEqual(2);
  });

  it('trips more often, bank by bank', () => {
    // Law: whatever trips at a lower ceiling is reached on the way to a higher one.
    tripsOf(middle).forEach((trips, bank) => {
      expect(tripsOf(high)[bank]).toBeGreaterThanOrEqual(trips);
    });
  });
});
