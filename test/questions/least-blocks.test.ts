import { describe, expect, it } from 'vitest';
import { renderAcceptance } from '../../src/output/acceptance-text.js';
import { answerStudy } from '../../src/questions/answer-study.js';
import type { AcceptanceLine, Study } from '../../src/study/study.js';
import { madeUpCandidate, madeUpStore, madeUpStudy } from './made-up-study.js';

const MEAN: AcceptanceLine = { measure: 'drift', statistic: 'mean', bound: 'at-most', limit: 8 };

async function answered(values: readonly (number | null)[], more: Partial<Study> = {}, line = MEAN) {
  const candidates = [madeUpCandidate('strings')];
  const study = madeUpStudy({ plan: 'sobol', blockSize: 8, candidates, acceptance: [line], ...more });
  const answers = await answerStudy(study, madeUpStore(study, [{ [line.measure]: [0, ...values] }]));
  return { ...answers.verdicts[0].lines[0], text: renderAcceptance(answers, study).join(' ').replaceAll(/\s+/g, ' ') };
}

const spread = (n: number) => Array.from({ length: n }, (_, index) => 7.5 + (index % 3));

describe('the least blocks of a mean', () => {
  it('are eight where only whole blocks are independent, and told with their banks', async () => {
    // By hand: 8 blocks of 8 banks.
    const { verdict, least, text } = await answered(spread(24));
    expect([verdict, least]).toEqual(['not decided', { blocks: 8, banks: 64 }]);
    expect(text).toContain('not decided strings (needs at least 8 blocks, 64 banks)');
    expect(text).not.toContain('no number of banks');
  });

  it('count blocks without any value', async () => {
    // By hand: of 2 blocks 1 has values, so that 16 are needed.
    const { least } = await answered([...spread(8), ...new Array<null>(8).fill(null)]);
    expect(least).toEqual({ blocks: 16, banks: 128 });
  });

  it('are there, matter to no other statistic and plan, and help nothing without any value', async () => {
    expect((await answered(spread(64))).least).toBeNull();
    expect((await answered(spread(24), { plan: 'independent' })).least).toBeNull();
    expect((await answered(spread(24), {}, { ...MEAN, statistic: 'percentile_95' })).least).toBeNull();
    const { least, text } = await answered(new Array<null>(24).fill(null));
    expect(least).toBeNull();
    expect(text).toContain('(no number of banks would decide)');
  });
});
