import { describe, expect, it } from 'vitest';
import { ColumnValues } from '../../src/outcomes/column-values.js';
import type { OutcomeColumn } from '../../src/outcomes/columns.js';
import { summariseCheckpoint } from '../../src/questions/by-cycle.js';
import { madeUpCandidate, madeUpStudy } from './made-up-study.js';

const column: OutcomeColumn = {
  name: 'drift_at_cycle_60',
  role: 'by-cycle',
  unit: '%',
  definition: '',
  measure: 'drift',
  cycle: 60,
};

describe('by-cycle summary', () => {
  it('gives mean, median and both tails at the checkpoint', () => {
    // By hand, definition 7 of Hyndman and Fan: of 1..100 the 5th percentile is 1 + 0.05 x 99 = 5.95, the 95th 95.05.
    const values = new ColumnValues(Float64Array.from({ length: 100 }, (_, index) => 100 - index));
    const rows = summariseCheckpoint(madeUpStudy(), madeUpCandidate('strings'), column, values);
    expect(rows.map((row) => [row.measure, row.cycle, row.unit, row.statistic])).toEqual([
      ['drift', 60, '%', 'mean'],
      ['drift', 60, '%', 'median'],
      ['drift', 60, '%', 'percentile_5'],
      ['drift', 60, '%', 'percentile_95'],
    ]);
    const estimates = rows.map((row) => row.estimate ?? Number.NaN);
    for (const [index, expected] of [50.5, 50.5, 5.95, 95.05].entries()) {
      expect(estimates[index]).toBeCloseTo(expected, 10);
    }
    for (const row of rows) expect(row.lower ?? Number.NaN).toBeLessThan(row.upper ?? Number.NaN);
  });

  it('says why a native pack has no drift', () => {
    const none = new ColumnValues(Float64Array.of(Number.NaN));
    const rows = summariseCheckpoint(madeUpStudy(), madeUpCandidate('packs', { wiring: 'native' }), column, none);
    expect(rows).toHaveLength(4);
    for (const row of rows) expect(row.note).toBe('not applicable: one BMS over the full series length');
  });

  it('has nothing to say of a column that is no checkpoint', () => {
    const drawn: OutcomeColumn = { ...column, role: 'drawn', measure: null, cycle: null };
    const values = new ColumnValues(Float64Array.of(1));
    expect(summariseCheckpoint(madeUpStudy(), madeUpCandidate('strings'), drawn, values)).toEqual([]);
  });
});
