import { describe, expect, it } from 'vitest';
import { ColumnValues } from '../../src/outcomes/column-values.js';
import { summariseFirstEvent } from '../../src/questions/first-event.js';
import { proportionEstimate } from '../../src/statistics/proportion-estimate.js';
import { madeUpCandidate, madeUpStudy } from './made-up-study.js';

describe('share of banks without a first event', () => {
  const study = madeUpStudy({ cycles: 20 });
  const measure = 'early_cutoff_on_charge_first_cycle';
  const summarise = (...firstCycles: readonly number[]) =>
    summariseFirstEvent(study, madeUpCandidate('strings'), measure, new ColumnValues(Float64Array.from(firstCycles)));

  it('falls where banks have their first, and has the interval of a proportion', () => {
    const none = new Array<number>(54).fill(Number.NaN);
    const rows = summarise(3, 3, 3, 3, 3, 20, ...none);
    expect(rows.map(({ cycle }) => cycle)).toEqual(Array.from({ length: 20 }, (_, index) => index + 1));
    // By hand: 60 banks, 55 without one from cycle 3 on, 54 after the last cycle.
    const at = (cycle: number) => rows[cycle - 1];
    expect(at(2).estimate).toBe(100);
    expect(at(3).estimate).toBeCloseTo(5500 / 60, 10);
    expect(at(19).estimate).toBeCloseTo(5500 / 60, 10);
    expect(at(20).estimate).toBeCloseTo(90, 10);
    const plain = proportionEstimate(54, 60, 0.95);
    expect(at(20).lower).toBeCloseTo(100 * (plain.lower ?? 9), 8);
    expect(at(20).upper).toBeCloseTo(100 * (plain.upper ?? 9), 8);
    expect(at(20)).toMatchObject({ statistic: 'share_without', unit: '%', instances: 60, note: 'pointwise' });
  });

  it('stays at 100 % where no bank has one, with an interval, and at 0 once all have', () => {
    const [first] = summarise(...new Array<number>(60).fill(Number.NaN));
    // By hand: S^60 = 0.025.
    expect(first).toMatchObject({ estimate: 100, upper: 100, lower: expect.closeTo(100 * 0.025 ** (1 / 60), 4) });
    expect(summarise(2, 2, 4)[10]).toMatchObject({ estimate: 0, lower: 0 });
  });
});
