import { describe, expect, it } from 'vitest';
import type { Measure } from '../../src/measures/measure.js';
import { measureNamed } from '../../src/measures/registry.js';
import { ColumnValues } from '../../src/outcomes/column-values.js';
import { adjustedForFamily, compareMeasure } from '../../src/questions/comparison.js';
import { madeUpCandidate, madeUpStudy } from './made-up-study.js';

const study = madeUpStudy();
const reference = madeUpCandidate('strings');
const contest = { candidate: madeUpCandidate('cross'), reference };

function measure(name: string): Measure {
  const found = measureNamed(name);
  if (found === undefined) throw new Error(name);
  return found;
}

function column(values: readonly number[]): ColumnValues {
  return new ColumnValues(Float64Array.from(values));
}

/** Columns of two candidates with these numbers of banks: event in both, only in the first, only in the second, in none. */
function pairedEvents(both: number, onlyFirst: number, onlySecond: number, neither: number) {
  const list = (...parts: readonly (readonly [number, number])[]) =>
    column(parts.flatMap(([count, value]) => new Array<number>(count).fill(value)));
  return {
    first: list([both, 1], [onlyFirst, 1], [onlySecond, 0], [neither, 0]),
    second: list([both, 1], [onlyFirst, 0], [onlySecond, 1], [neither, 0]),
  };
}

describe('comparison with the reference', () => {
  it.each([
    // Newcombe, Stat. Med. 17 (1998) 2635, method 10; Tango, ibid. 891; exact McNemar, Fagerland et al. 2013.
    { counts: [36, 12, 2, 0], points: 20, lower: 5.693, upper: 34.0428, score: [6.1112, 34.4709], exact: 0.0129395 },
    {
      counts: [1, 1, 7, 12],
      points: -28.5714,
      lower: -50.692,
      upper: -2.5559,
      score: [-51.7232, -2.6003],
      exact: 0.0703125,
    },
    { counts: [794, 150, 86, 570], points: 4, lower: 2.123, upper: 5.8704, score: [2.1362, 5.8998], exact: 3.71594e-5 },
  ] as const)(
    'gives the published interval in points for the counts $counts',
    ({ counts, points, lower, upper, score, exact }) => {
      const { first, second } = pairedEvents(counts[0], counts[1], counts[2], counts[3]);
      const rows = compareMeasure(study, contest, measure('load_lost'), first, second);
      expect(rows[0]).toMatchObject({
        candidate: 'cross',
        reference: 'strings',
        statistic: 'difference_of_shares',
        unit: 'points',
        method: 'newcombe-10',
      });
      expect(rows[0].estimate).toBeCloseTo(points, 4);
      expect(rows[0].lower).toBeCloseTo(lower, 4);
      expect(rows[0].upper).toBeCloseTo(upper, 4);
      expect((rows[0].pValue ?? 9) / exact).toBeCloseTo(1, 5);
      expect(rows[0].test).toBe('mcnemar-exact');
      expect(rows[1]).toMatchObject({ statistic: 'difference_of_shares_by_score', method: 'tango', pValue: null });
      expect(rows[1].lower).toBeCloseTo(score[0], 4);
      expect(rows[1].upper).toBeCloseTo(score[1], 4);
      expect(rows).toHaveLength(2);
    },
  );

  it('gives the mean difference of amounts, and how often the candidate has the lower, an equal or the higher one', () => {
    // By hand: differences -3, -1, 0, +2, -3; mean -1, sd sqrt((4 + 0 + 1 + 9 + 4) / 4) = 2.121320,
    // t(0.975; 4) = 2.776445 (table): -1 -+ 2.633967.
    const rows = compareMeasure(
      study,
      contest,
      measure('lost_capacity'),
      column([1, 5, 4, 9, 0]),
      column([4, 6, 4, 7, 3]),
    );
    expect(rows.map((row) => [row.statistic, row.unit])).toEqual([
      ['mean_difference', 'points'],
      ['share_lower', '%'],
      ['share_equal', '%'],
      ['share_higher', '%'],
    ]);
    expect(rows[0].estimate).toBeCloseTo(-1, 12);
    expect(rows[0].lower).toBeCloseTo(-3.633967, 5);
    expect(rows[0].upper).toBeCloseTo(1.633967, 5);
    expect(rows.slice(1).map((row) => Math.round(row.estimate ?? Number.NaN))).toEqual([60, 20, 20]);
  });

  it('takes differences below what the model resolves for equal', () => {
    const rows = compareMeasure(study, contest, measure('lost_capacity'), column([1, 2]), column([1 + 5e-7, 2 - 2e-6]));
    expect(rows.slice(1).map((row) => row.estimate)).toEqual([0, 50, 50]);
  });

  it('changes sign when the sides change', () => {
    const { first, second } = pairedEvents(3, 9, 4, 20);
    const [forth] = compareMeasure(study, contest, measure('load_lost'), first, second);
    const [back] = compareMeasure(study, contest, measure('load_lost'), second, first);
    expect(back.estimate).toBeCloseTo(-(forth.estimate ?? Number.NaN), 12);
    expect(back.lower).toBeCloseTo(-(forth.upper ?? Number.NaN), 12);
  });

  it('leaves out banks that lack a value on one side, and says so', () => {
    // By hand: the pairs (2, 1) and (5, 2) remain, mean difference 2; two points always lie on a line.
    const first = column([Number.NaN, 2, 3, 5]);
    const second = column([7, 1, Number.NaN, 2]);
    const [mean, lower] = compareMeasure(study, contest, measure('drift'), first, second);
    expect(mean).toMatchObject({
      estimate: 2,
      instances: 2,
      note: 'correlation of the pairs 1.00; over the 2 of 4 sampled banks that have a value',
    });
    expect(lower.instances).toBe(2);
  });

  it('keeps empty rows against native packs, which have no drift between modules', () => {
    const packs = { candidate: madeUpCandidate('packs', { wiring: 'native' }), reference };
    const rows = compareMeasure(study, packs, measure('drift'), column([Number.NaN, Number.NaN]), column([1, 2]));
    expect(rows).toHaveLength(4);
    for (const row of rows) {
      expect(row).toMatchObject({ estimate: null, note: 'not applicable: one BMS over the full series length' });
    }
  });

  it('names the unit of a difference of rates', () => {
    const [row] = compareMeasure(study, contest, measure('drift_growth'), column([1, 2]), column([1, 3]));
    expect(row.unit).toBe('points/month');
  });

  it('gives intervals that hold together, and p values to decide by, over all candidates of a study', () => {
    const candidates = [reference, madeUpCandidate('cross'), madeUpCandidate('native')];
    const three = madeUpStudy({ candidates });
    const { first, second } = pairedEvents(14, 5, 0, 22);
    const [row] = compareMeasure(three, contest, measure('load_lost'), first, second);
    // By hand: two comparisons at 95 % together are 97.5 % each.
    const each = compareMeasure({ ...study, confidenceFraction: 0.975 }, contest, measure('load_lost'), first, second);
    expect(row.simultaneousLower).toBeCloseTo(each[0].lower ?? 9, 10);
    expect(row.simultaneousUpper).toBeCloseTo(each[0].upper ?? 9, 10);
    expect(row.simultaneousLower).toBeLessThan(row.lower ?? 9);
    const amounts = (p: number) => ({ ...row, measure: 'drift', statistic: 'mean_difference' as const, pValue: p });
    const adjusted = adjustedForFamily([row, amounts(0.03), { ...row, pValue: 0.04 }, { ...row, pValue: null }]);
    // By hand: 0.0625 and 0.04 of one measure: 0.04 x 2 = 0.08, then 0.0625 raised to it; the other measure is alone.
    expect(adjusted.map(({ pValueHolm }) => pValueHolm)).toEqual([0.08, 0.03, 0.08, row.pValueHolm]);
  });

  it('leaves simultaneous intervals out where their confidence is beyond what is checked', () => {
    const sure = madeUpStudy({
      candidates: [reference, madeUpCandidate('cross'), madeUpCandidate('native')],
      confidenceFraction: 0.9999,
    });
    const { first, second } = pairedEvents(14, 5, 0, 22);
    const [row] = compareMeasure(sure, contest, measure('load_lost'), first, second);
    expect([row.simultaneousLower, row.simultaneousUpper]).toEqual([null, null]);
    expect(row.lower).not.toBeNull();
  });

  it('goes by blocks where only they are independent', () => {
    const stratified = madeUpStudy({ blockSize: 32, plan: 'latin-hypercube' });
    const values = Array.from({ length: 512 }, (_, index) => ((index * 7919) % 512) / 10);
    const rows = compareMeasure(
      stratified,
      contest,
      measure('lost_capacity'),
      column(values),
      column(values.map((value, index) => value + Math.sin(index))),
    );
    expect(rows[0]).toMatchObject({ method: 'paired-block-t', test: 'paired-block-t', instances: 512 });
    const events = pairedEvents(100, 4, 2, 406);
    const [few] = compareMeasure(stratified, contest, measure('load_lost'), events.first, events.second);
    expect(few).toMatchObject({ method: 'newcombe-10', test: 'mcnemar-exact' });
    expect(few.note).toContain('pooled over blocks, conservative');
  });
});
