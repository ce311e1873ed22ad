import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { buildBank } from '../../src/bank/bank.js';
import { createBankState } from '../../src/bank/bank-state.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { driftNow, growthPerMonth, meanOf } from '../../src/measures/drift.js';
import type { Candidate, ModuleParameters } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { DEFAULT_TABLE } from '../reference/default-table.js';
import { plainModule } from '../reference/plain-module.js';

function bankAndState(modules: ModuleParameters[][], wiring: Candidate['wiring'] = 'strings') {
  const { candidate } = bankOf('bank', { modules, cycles: [], wiring });
  const named = new Map(modules.flat().map((module) => [module.id, module]));
  const bank = buildBank(candidate, named, compileOcvCurves([DEFAULT_TABLE]));
  return { bank, state: createBankState(bank) };
}

/** A module of cells of the given capacities and charges. */
const cells = (id: string, capacityAh: number[], arrivalCharge: number[]): ModuleParameters =>
  plainModule(id, { capacityAh, arrivalCharge });

describe('driftNow', () => {
  // Missing charge in Ah by hand. String 1: a 100 x 0.5 = 50, 100 x 0.4 = 40, so 50; b 80 x 0.25 = 20, 90 x 0.2 = 18, so
  // 20: modules 30 apart, cells 50 - 18 = 32. String 2: c 10, 9, so 10; d 12, 30, so 30: 20 apart, cells 30 - 9 = 21.
  const strings = [
    [cells('a', [100, 100], [0.5, 0.6]), cells('b', [80, 90], [0.75, 0.8])],
    [cells('c', [100, 90], [0.9, 0.9]), cells('d', [120, 100], [0.9, 0.7])],
  ];

  it('is the spread of missing charge in the worst string, of modules and of cells', () => {
    const { bank, state } = bankAndState(strings);
    const drift = driftNow(bank, state);
    expect(drift.moduleAh).toBeCloseTo(30, 10);
    expect(drift.cellAh).toBeCloseTo(32, 10);
  });

  it('has no modules to compare in native packs, but the same cells', () => {
    const { bank, state } = bankAndState(strings, 'native');
    const drift = driftNow(bank, state);
    expect(drift.moduleAh).toBeNull();
    expect(drift.cellAh).toBeCloseTo(32, 10);
  });

  it('stays as it is while a common current flows', () => {
    fc.assert(
      fc.property(fc.double({ min: -40, max: 40, noNaN: true }), (passedAh) => {
        const { bank, state } = bankAndState(strings);
        const before = driftNow(bank, state);
        for (let c = 0; c < bank.cells; c++) state.charge[c] += (3600 * passedAh) / bank.capacityAs[c];
        const after = driftNow(bank, state);
        expect(after.moduleAh).toBeCloseTo(before.moduleAh ?? Number.NaN, 9);
        expect(after.cellAh).toBeCloseTo(before.cellAh, 9);
      }),
      { seed: 91, numRuns: 50 },
    );
  });
});

describe('growthPerMonth', () => {
  const rising = (cycles: number, perCycle: number): Float64Array =>
    Float64Array.from({ length: cycles }, (_, day) => perCycle * day);

  it('is the slope of a straight line, whatever the horizon', () => {
    for (const days of [14, 20, 44, 60, 89, 90, 91, 180, 365]) {
      expect(growthPerMonth(rising(days, 0.1), 1)).toBeCloseTo(3, 9);
    }
  });

  it('counts cycles that are longer or shorter than a day', () => {
    // 0.1 a cycle; a month is 30 days: 15 cycles of two days, 60 of half a day.
    expect(growthPerMonth(rising(90, 0.1), 2)).toBeCloseTo(1.5, 9);
    expect(growthPerMonth(rising(360, 0.1), 0.5)).toBeCloseTo(6, 9);
  });

  it('compares 30-day means from 90 days on, leaving the first 30 days out', () => {
    // By hand over 120 days: nothing before day 30, 1 on days 31 to 60, 4 on days 91 to 120: 3 in 60 days.
    const values = Float64Array.from({ length: 120 }, (_, day) => (day < 30 ? 100 : day < 60 ? 1 : day < 90 ? 9 : 4));
    expect(growthPerMonth(values, 1)).toBeCloseTo(1.5, 12);
  });

  it('takes 90 days for long enough', () => {
    // By hand: 2 on days 31 to 60, 5 on days 61 to 90: 3 in 30 days. Seven-day means at the ends would give 3 in 53 days.
    const values = Float64Array.from({ length: 90 }, (_, day) => (day < 30 ? 100 : day < 60 ? 2 : 5));
    expect(growthPerMonth(values, 1)).toBeCloseTo(3, 12);
  });

  it('compares 7-day means below 90 days', () => {
    // By hand over 60 days: 1 on days 31 to 37, 5 on days 54 to 60: 4 in 23 days.
    const values = Float64Array.from({ length: 60 }, (_, day) => (day >= 30 && day < 37 ? 1 : day >= 53 ? 5 : 77));
    expect(growthPerMonth(values, 1)).toBeCloseTo((30 * 4) / 23, 12);
  });

  it('is absent where two means do not fit', () => {
    expect(growthPerMonth(rising(13, 0.1), 1)).toBeNull();
    expect(growthPerMonth(rising(14, 0.1), 1)).not.toBeNull();
    expect(growthPerMonth(new Float64Array(1), 1)).toBeNull();
  });
});

describe('meanOf', () => {
  it('takes the values from the first on, without the last bound', () => {
    expect(meanOf(Float64Array.from([9, 1, 2, 3, 9]), 1, 4)).toBe(2);
  });
});
