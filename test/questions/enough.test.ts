import { describe, expect, it } from 'vitest';
import { answerStudy } from '../../src/questions/answer-study.js';
import { answerEnough, takeLook } from '../../src/questions/enough.js';
import type { Study } from '../../src/study/study.js';
import { madeUpCandidate, madeUpStore, madeUpStudy } from './made-up-study.js';

const watched = [{ measure: 'load_lost', statistic: 'share_of_banks', halfWidth: 10 }];

function study(more: Partial<Study> = {}): Study {
  return madeUpStudy({ instances: 128, enough: { looks: [32, 64, 128], watched }, ...more });
}

/** The twin's value, then those of banks: every `nth` has the event. */
function everyNth(nth: number, banks: number): readonly number[] {
  return [0, ...Array.from({ length: banks }, (_, index) => (index % nth === 0 ? 1 : 0))];
}

describe('a look', () => {
  it('is enough when every watched interval of every candidate is narrow, by the first banks only', async () => {
    // Wilson at p = 1/4 by hand: reach 1.959964 sqrt(n p (1 - p) + 0.960365) / (n + 3.841459): 14.4 points of 32, 10.4 of
    // 64, 7.4 of 128; with 1 in 16: 4 of 64, exact.
    const store = madeUpStore(study(), [{ load_lost: everyNth(4, 128) }, { load_lost: everyNth(16, 128) }]);
    const looks = await Promise.all([32, 64, 128].map((count) => takeLook(study(), store, count)));
    expect(looks.map((look) => look.enough)).toEqual([false, false, true]);
    const widths = looks.map((look) => look.watched.map(({ halfWidth }) => halfWidth ?? 99));
    for (const [at, width] of [14.4, 10.4, 7.4].entries()) expect(widths[at][0]).toBeCloseTo(width, 1);
    expect(looks[1].watched.map(({ narrow }) => narrow)).toEqual([false, true]);
    expect(looks[2].watched[0]).toMatchObject({ candidate: 'strings', unit: '%', wanted: 10 });
  });

  it('does not depend on banks beyond it', async () => {
    const one = madeUpStore(study(), [{ load_lost: everyNth(4, 128) }, { load_lost: everyNth(16, 128) }]);
    const prefix = madeUpStore(study(), [{ load_lost: everyNth(4, 64) }, { load_lost: everyNth(16, 64) }]);
    expect(await takeLook(study(), one, 64)).toEqual(await takeLook(study(), prefix, 64));
  });

  it('does not take equal values for a narrow mean, nor too few for a percentile, but passes what cannot be', async () => {
    const of = (statistic: string) => ({ measure: 'drift', statistic, halfWidth: 1 });
    const candidates = [madeUpCandidate('strings'), madeUpCandidate('packs', { wiring: 'native' })];
    const enough = { looks: [32, 128], watched: [of('mean'), of('median'), of('percentile_95')] };
    const one = study({ candidates, enough });
    const store = madeUpStore(one, [{ drift: [0, ...new Array<number>(32).fill(3)] }, { load_lost: everyNth(2, 32) }]);
    const look = await takeLook(one, store, 32);
    expect(look.watched.map(({ narrow }) => narrow)).toEqual([false, true, false, true, true, true]);
    expect(look.watched.map(({ halfWidth }) => halfWidth)).toEqual([0, 0, null, null, null, null]);
  });
});

describe('the end of a run with looks', () => {
  const values = (banks: number, nth = 4) => [{ load_lost: everyNth(nth, banks) }, { load_lost: everyNth(16, banks) }];
  const endOf = async (banks: number, nth = 4) => await answerEnough(study(), madeUpStore(study(), values(banks, nth)));

  it('tells the looks taken and why it ended', async () => {
    expect(await endOf(64, 8)).toMatchObject({ end: 'narrow', schedule: [32, 64, 128] });
    expect((await endOf(64, 8))?.looks.map(({ instances }) => instances)).toEqual([32, 64]);
    expect(await endOf(64, 4)).toMatchObject({ end: 'unfinished' });
    expect(await endOf(96, 8)).toMatchObject({ end: 'unfinished' });
    expect(await endOf(128, 4)).toMatchObject({ end: 'narrow' });
    const strict = study({ enough: { looks: [32, 128], watched: [{ ...watched[0], halfWidth: 1 }] } });
    expect(await answerEnough(strict, madeUpStore(strict, values(128)))).toMatchObject({ end: 'maximum' });
    expect(await answerEnough(madeUpStudy(), madeUpStore(madeUpStudy(), values(4)))).toBeNull();
  });

  it('widens the intervals of verdicts only', async () => {
    const acceptance = [{ measure: 'load_lost', statistic: 'share_of_banks', bound: 'at-most', limit: 33 }] as const;
    const store = madeUpStore(study(), values(128));
    const fixed = await answerStudy(madeUpStudy({ instances: 128, acceptance }), store);
    const looked = await answerStudy(study({ acceptance }), store);
    expect(looked.summary).toEqual(fixed.summary);
    // By hand: 32 of 128: 95 % Wilson ends at 33.2, 1 - 0.05 / 3 = 98.33 % further out.
    expect(fixed.verdictConfidencePercent).toBe(95);
    expect(looked.verdictConfidencePercent).toBeCloseTo(100 - 5 / 3, 9);
    const upper = ({ verdicts }: typeof fixed) => verdicts[0].lines[0].row.upper ?? Number.NaN;
    expect(upper(fixed)).toBeCloseTo(33.2, 1);
    expect(upper(looked)).toBeGreaterThan(upper(fixed) + 1);
  });
});
