import { describe, expect, it } from 'vitest';
import { judgeCandidates } from '../../src/questions/verdict.js';
import type { AcceptanceLine } from '../../src/study/study.js';
import { madeUpCandidate, madeUpStore, madeUpStudy } from './made-up-study.js';

async function wouldDecide(line: AcceptanceLine, values: readonly (number | null)[]): Promise<number | null> {
  const study = madeUpStudy({ candidates: [madeUpCandidate('strings')], acceptance: [line] });
  const [{ lines }] = await judgeCandidates(study, madeUpStore(study, [{ [line.measure]: [0, ...values] }]));
  expect(lines[0].verdict).toBe('not decided');
  return lines[0].wouldDecide;
}

const zeros = (n: number): readonly number[] => new Array<number>(n).fill(0);

describe('the number of banks that would decide', () => {
  const rare: AcceptanceLine = { measure: 'load_lost', statistic: 'share_of_banks', bound: 'at-most', limit: 0.5 };

  it('is that of the exact limit where none was seen', async () => {
    // By hand: (1 - 0.005)^n <= 0.025 from n = ln 0.025 / ln 0.995 = 735.9 on; 3.69 / 0.005 = 738.
    expect(await wouldDecide(rare, zeros(64))).toBe(736);
  });

  it('grows as the limit comes near, and there is none on it', async () => {
    const quarter = (limit: number) =>
      wouldDecide({ ...rare, limit }, [1, 0, 0, 0, 1, 0, 0, 0, 1, 0, 0, 0, 1, 0, 0, 0]);
    const [far, near] = [(await quarter(30)) ?? 0, (await quarter(27)) ?? 0];
    // By hand, normal: 1.959964^2 x 0.1875 / 0.05^2 = 288, and / 0.02^2 = 1801.
    expect(far / 288).toBeGreaterThan(0.9);
    expect(far / 288).toBeLessThan(1.2);
    expect(near / 1801).toBeGreaterThan(0.9);
    expect(near / 1801).toBeLessThan(1.2);
    expect(await quarter(25)).toBeNull();
  });

  it('is that of the ranks for a percentile, also where there are too few for an interval', async () => {
    // By hand: with all within the limit the largest of 72 is the first to be an upper end (0.95^72 <= 0.025).
    const tail: AcceptanceLine = { measure: 'drift', statistic: 'percentile_95', bound: 'at-most', limit: 1 };
    expect(await wouldDecide(tail, zeros(20))).toBe(72);
    const low: AcceptanceLine = { measure: 'usable_capacity', statistic: 'percentile_5', bound: 'at-least', limit: -1 };
    expect(await wouldDecide(low, zeros(20))).toBe(72);
  });

  it('goes with the square of the width for a mean, and counts banks without a value', async () => {
    const mean: AcceptanceLine = { measure: 'drift', statistic: 'mean', bound: 'at-most', limit: 2 };
    // By hand: of 0 and 3 in turn, 8 times: mean 1.5, sd sqrt(36 / 15) = 1.549193, t(0.975; 15) = 2.131450 (table), reach
    // 0.825507; (0.825507 / 0.5)^2 x 16 = 43.6. With as many banks without a value twice that, of whole numbers.
    const values = Array.from({ length: 16 }, (_, index) => 3 * (index % 2));
    expect(await wouldDecide(mean, values)).toBe(44);
    expect(
      await wouldDecide(
        mean,
        values.flatMap((value) => [value, null]),
      ),
    ).toBe(88);
    expect(await wouldDecide({ ...mean, limit: 1.5 }, values)).toBeNull();
    expect(await wouldDecide(mean, [null, null])).toBeNull();
  });
});
