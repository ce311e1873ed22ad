import { describe, expect, it } from 'vitest';
import type { Measure } from '../../src/measures/measure.js';
import { measureNamed } from '../../src/measures/registry.js';
import { ColumnValues } from '../../src/outcomes/column-values.js';
import { summariseMeasure } from '../../src/questions/summary.js';
import { madeUpCandidate, madeUpStudy } from './made-up-study.js';

const study = madeUpStudy();
const strings = madeUpCandidate('strings');
const native = madeUpCandidate('native', { wiring: 'native' });

function measure(name: string): Measure {
  const found = measureNamed(name);
  if (found === undefined) throw new Error(name);
  return found;
}

function events(happened: number, of: number): ColumnValues {
  return new ColumnValues(Float64Array.from({ length: of }, (_, index) => (index < happened ? 1 : 0)));
}

function amounts(...values: readonly number[]): ColumnValues {
  return new ColumnValues(Float64Array.from(values));
}

describe('summary of a measure', () => {
  it('gives the share of banks with an event in percent, with the published Wilson interval', () => {
    // Newcombe, Stat. Med. 17 (1998) 857: 81 of 263, Wilson 0.255289 to 0.366210.
    const [, row] = summariseMeasure(study, strings, measure('load_lost'), events(81, 263), 0);
    expect(row).toMatchObject({
      candidate: 'strings',
      measure: 'load_lost',
      fromCycle: 1,
      toCycle: 180,
      statistic: 'share_of_banks',
      unit: '%',
      method: 'wilson',
      instances: 263,
      note: '',
    });
    expect(row.estimate).toBeCloseTo((81 / 263) * 100, 10);
    expect(row.lower).toBeCloseTo(25.5289, 4);
    expect(row.upper).toBeCloseTo(36.621, 4);
  });

  it('gives a certain event 100 % and an event never seen 0 %, with the exact one-sided reach', () => {
    // Clopper and Pearson, 0 of 20: upper end 0.168433 (same source); 20 of 20 mirrors it.
    const [, never] = summariseMeasure(study, strings, measure('load_lost'), events(0, 20), 0);
    expect(never).toMatchObject({ estimate: 0, lower: 0, method: 'clopper-pearson' });
    expect(never.upper).toBeCloseTo(16.8433, 4);
    const [, always] = summariseMeasure(study, strings, measure('load_lost'), events(20, 20), 1);
    expect(always).toMatchObject({ estimate: 100, upper: 100 });
    expect(always.lower).toBeCloseTo(83.1567, 4);
  });

  it('speaks of the window of the measure', () => {
    const [, row] = summariseMeasure(study, strings, measure('early_cutoff_on_charge'), events(1, 4), 0);
    expect([row.fromCycle, row.toCycle]).toEqual([151, 180]);
  });

  it('gives amounts their mean and quantiles, in any order of instances', () => {
    // By hand: mean of 1..10 is 5.5, sd 3.027650, t(0.975; 9) = 2.262157 (table): 5.5 -+ 2.165852.
    // Median by ranks 2 and 9 for n = 10 (published, coverage 0.9785). No 95th percentile from ten values.
    const rows = summariseMeasure(
      study,
      strings,
      measure('lost_capacity'),
      amounts(9, 2, 10, 1, 8, 3, 7, 4, 6, 5),
      0.5,
    );
    expect(rows.map((row) => row.statistic)).toEqual(['twin', 'mean', 'median', 'percentile_95']);
    expect(rows[1].estimate).toBeCloseTo(5.5, 12);
    expect(rows[1].lower).toBeCloseTo(3.334148, 5);
    expect(rows[1].upper).toBeCloseTo(7.665852, 5);
    expect(rows[2]).toMatchObject({ estimate: 5.5, lower: 2, upper: 9, note: 'ranks 2 and 9' });
    expect(rows[3]).toMatchObject({ estimate: null, lower: null, upper: null, note: 'not estimable from 10' });
  });

  it('puts the twin first, an event of the twin being 100 %, without an interval', () => {
    const [event] = summariseMeasure(study, strings, measure('load_lost'), events(1, 4), 1);
    expect(event).toMatchObject({ statistic: 'twin', estimate: 100, lower: null, upper: null, instances: 1 });
    const [amount] = summariseMeasure(study, strings, measure('lost_capacity'), amounts(1, 2), 0.25);
    expect(amount).toMatchObject({ statistic: 'twin', unit: '%', estimate: 0.25 });
  });

  it('says how many banks have a value where some have none', () => {
    // By hand: mean of 2 and 4.
    const values = amounts(Number.NaN, 2, Number.NaN, 4);
    const rows = summariseMeasure(study, strings, measure('early_cutoff_on_charge_first_cycle'), values, null);
    expect(rows[0]).toMatchObject({ statistic: 'twin', estimate: null });
    expect(rows[1]).toMatchObject({
      statistic: 'mean',
      estimate: 3,
      instances: 2,
      note: 'over the 2 of 4 sampled banks that have a value',
    });
    expect(rows[2].note).toBe('not estimable from 2; over the 2 of 4 sampled banks that have a value');
  });

  it('keeps the row of a measure that no bank has, and says why', () => {
    const none = amounts(Number.NaN, Number.NaN);
    for (const row of summariseMeasure(study, native, measure('drift'), none, null)) {
      expect(row).toMatchObject({
        estimate: null,
        method: '',
        note: 'not applicable: one BMS over the full series length',
      });
    }
    const [, absent] = summariseMeasure(study, native, measure('cell_drift'), none, null);
    expect(absent).toMatchObject({ estimate: null, instances: 2, note: 'absent in every sampled bank' });
  });

  it('takes a string of a single module for one BMS as well', () => {
    const single = madeUpCandidate('single', { strings: [['A1'], ['B1']] });
    const [, row] = summariseMeasure(study, single, measure('drift'), amounts(Number.NaN), null);
    expect(row.note).toMatch(/^not applicable/);
  });

  it('gives one bank its share, and no interval of an amount', () => {
    const [, share] = summariseMeasure(study, strings, measure('load_lost'), events(1, 1), 0);
    // Clopper and Pearson for 1 of 1: lower end 0.025 exactly (alpha / 2).
    expect(share.lower).toBeCloseTo(2.5, 10);
    const [, mean] = summariseMeasure(study, strings, measure('lost_capacity'), amounts(3), 3);
    expect(mean).toMatchObject({ estimate: null, note: 'not estimable from 1' });
  });
});
