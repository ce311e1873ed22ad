import { describe, expect, it } from 'vitest';
import { twinStudy, withoutSpread, withScaledSpread } from '../../src/study/variants.js';
import { populationOf, studyOf, studyWith, studyWithStock } from './study-under-test.js';

const study = studyOf(
  studyWith({ duty: 'duty: {phases: [{rest_h: 1}], load_factor: {nominal: 1, bank_sd_percent: 5}}' }),
);

describe('a variant', () => {
  it('takes one spread away and leaves every other as it was', () => {
    const variant = withoutSpread(study, { stock: 'house', quantity: 'standbyA' });
    const before = populationOf(study, 'house').quantities;
    const after = populationOf(variant, 'house').quantities;
    expect(after.standbyA).toEqual({ ...before.standbyA, module: { law: 'fixed' } });
    expect({ ...after, standbyA: null }).toEqual({ ...before, standbyA: null });
  });

  it('scales one level about the same mean', () => {
    const { capacityAh } = populationOf(
      withScaledSpread(study, { quantity: 'capacityAh', level: 'module' }, 2),
      'house',
    ).quantities;
    expect(capacityAh).toMatchObject({ module: { sd: 0.01 }, cell: { sd: 0.003 } });
  });

  it('scales the sigma of a lognormal law at its mean', () => {
    // By hand: CoV 0.3 has sigma^2 = ln 1.09; twice the sigma has CoV sqrt(1.09^4 - 1) = 0.641689.
    const { leakagePerMonth } = populationOf(withScaledSpread(study, {}, 2), 'house').quantities;
    expect('sd' in leakagePerMonth.cell && leakagePerMonth.cell.sd).toBeCloseTo(Math.sqrt(1.09 ** 4 - 1), 12);
  });

  it('is the study itself at factor 1 and scales truncation with the spread', () => {
    const one = populationOf(withScaledSpread(study, {}, 1), 'house').quantities;
    expect(one.overVoltageV).toEqual(populationOf(study, 'house').quantities.overVoltageV);
    const half = populationOf(withScaledSpread(study, {}, 0.5), 'house').quantities;
    expect(half.overVoltageV.module).toEqual({ law: 'truncated-normal', sd: 0.006, lower: -0.02, upper: 0.02 });
  });

  it('scales measured values about their mean, and their uncertainty', () => {
    const files = { 'lab.csv': 'capacity_Ah,standby_mA\n94,8\n96,9\n98,13\n' };
    const drawn = studyOf(
      studyWithStock([
        'rated_Ah: 100',
        'measured: {file: lab.csv, rows: resampled, uncertainty: {capacity_Ah: 0.5, standby_mA: 1}}',
      ]),
      files,
    );
    const { measured } = populationOf(withScaledSpread(drawn, { quantity: 'capacityAh' }, 0.5), 'house');
    // By hand: 96 +- 1 in place of 96 +- 2; standby stays.
    expect(measured).toEqual({
      quantities: ['capacityAh', 'standbyA'],
      uncertaintySd: [0.25, 0.001],
      rows: 'resampled',
      values: [
        [95, 0.008],
        [96, 0.009],
        [97, 0.013],
      ],
    });
    expect(populationOf(withScaledSpread(drawn, { level: 'cell' }, 0), 'house').measured).toEqual(
      populationOf(drawn, 'house').measured,
    );
    const twin = populationOf(twinStudy(drawn), 'house').measured;
    expect(twin?.rows === 'resampled' && new Set(twin.values.map(([capacity]) => capacity))).toEqual(new Set([96]));
    expect(twin?.uncertaintySd).toEqual([0, 0]);
  });

  it('refuses a negative factor', () => {
    expect(() => withScaledSpread(study, {}, -1)).toThrow(RangeError);
  });
});

describe('the twin', () => {
  it('has no spread anywhere and every mean of the study', () => {
    const twin = twinStudy(study);
    const laws = Object.values(populationOf(twin, 'house').quantities).flatMap(({ lot, module, cell }) => [
      lot,
      module,
      cell,
    ]);
    expect(new Set(laws.map(({ law }) => law))).toEqual(new Set(['fixed']));
    expect(twin.duty.loadFactor.bank).toEqual({ law: 'fixed' });
    expect(populationOf(twin, 'house').quantities.capacityAh.nominal).toBe(102);
  });
});
