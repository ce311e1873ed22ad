import { describe, expect, it } from 'vitest';
import { checkpointCycles } from '../../src/measures/checkpoint-cycles.js';
import { CYCLE_MEASURES, MEASURES } from '../../src/measures/registry.js';
import { answerStudy } from '../../src/questions/answer-study.js';
import { madeUpCandidate, madeUpStore, madeUpStudy } from './made-up-study.js';

const candidates = [
  madeUpCandidate('strings'),
  madeUpCandidate('cross'),
  madeUpCandidate('packs', { wiring: 'native' }),
];
const study = madeUpStudy({ candidates, instances: 3 });
// The first entry of each list is the twin's.
const store = madeUpStore(study, [
  {
    load_lost: [0, 1, 0, 1],
    lost_capacity: [0.1, 5, 6, 7],
    load_lost_days: [0, 2, 0, 1],
    drift_at_cycle_180: [0, 1, 2, 3],
  },
  { load_lost: [0, 0, 0, 1], lost_capacity: [0.1, 2, 8, 3], load_lost_days: [0, 0, 0, 1] },
  { load_lost: [1, 1, 1, 1], lost_capacity: [0.2, 1, 1, 1], load_lost_days: [9, 9, 9, 9] },
]);

describe('answers to a study', () => {
  it('hold every measure of every candidate, twin first, in the order of study and registry', async () => {
    const { summary } = await answerStudy(study, store);
    const expected = candidates.flatMap(({ key }) =>
      MEASURES.flatMap(({ name, statistics }) =>
        // A measure that names a place has no statistics, and no rows.
        (statistics.length > 0 ? ['twin', ...statistics] : []).map((statistic) => `${key} ${name} ${statistic}`),
      ),
    );
    expect(summary.map((row) => `${row.candidate} ${row.measure} ${row.statistic}`)).toEqual(expected);
  });

  it('take each twin from its own candidate', async () => {
    const { summary } = await answerStudy(study, store);
    const twins = summary.filter((row) => row.measure === 'load_lost' && row.statistic === 'twin');
    expect(twins.map((row) => row.estimate)).toEqual([0, 0, 100]);
  });

  it('hold every by-cycle measure at every checkpoint', async () => {
    const { byCycle } = await answerStudy(study, store);
    // Four statistics of each, and beside them the share of banks without a first cutoff on charge, on discharge.
    const perCheckpoint = 4 * CYCLE_MEASURES.length + 2;
    expect(byCycle).toHaveLength(candidates.length * checkpointCycles(180).length * perCheckpoint);
    const row = byCycle.find((one) => one.measure === 'drift' && one.cycle === 180 && one.statistic === 'mean');
    // By hand: mean of 1, 2, 3.
    expect(row).toMatchObject({ candidate: 'strings', estimate: 2 });
  });

  it('compare each candidate but the reference with it', async () => {
    const { comparisons } = await answerStudy(study, store);
    expect(new Set(comparisons.map((row) => row.candidate))).toEqual(new Set(['cross', 'packs']));
    // By hand: load lost in 1 of 3 against 2 of 3, -33.3 points; mean lost capacity 13/3 against 6.
    const cross = comparisons.filter((row) => row.candidate === 'cross');
    const difference = (measure: string) => cross.find((row) => row.measure === measure)?.estimate;
    expect(difference('load_lost')).toBeCloseTo(-100 / 3, 10);
    expect(difference('lost_capacity')).toBeCloseTo(-5 / 3, 10);
  });

  it('name the hardest case of all candidates', async () => {
    const { hardestCase } = await answerStudy(study, store);
    expect(hardestCase).toEqual({ candidate: 'cross', instance: 2, lostCapacityPercent: 8, loadLostCycles: 0 });
  });

  it('put the acceptance lines to every candidate', async () => {
    const acceptance = [{ measure: 'load_lost', statistic: 'share_of_banks', bound: 'at-most', limit: 20 }] as const;
    const { verdicts } = await answerStudy({ ...study, acceptance }, store);
    // Three of three banks: the exact interval begins at 0.025^(1/3) = 29.2 %, beyond 20 %.
    expect(verdicts.map(({ candidate, verdict }) => [candidate, verdict])).toEqual([
      ['strings', 'not decided'],
      ['cross', 'not decided'],
      ['packs', 'fails'],
    ]);
  });

  it('are there when nothing was measured at all', async () => {
    const nothing = madeUpStore(study, [
      { load_lost: [null, null] },
      { load_lost: [null, null] },
      { load_lost: [null, null] },
    ]);
    const { summary, comparisons, hardestCase, instances } = await answerStudy(study, nothing);
    expect(instances).toBe(1);
    expect(hardestCase).toBeNull();
    for (const row of [...summary, ...comparisons]) {
      expect(row.estimate).toBeNull();
      expect(row.note).not.toBe('');
    }
  });

  it('print the confidence as the study has it', async () => {
    expect((await answerStudy({ ...study, confidenceFraction: 0.999 }, store)).confidencePercent).toBe(99.9);
  });

  it('refuse a reference that is no candidate', async () => {
    await expect(answerStudy({ ...study, reference: 'other' }, store)).rejects.toThrow(
      'reference other is no candidate',
    );
  });
});
