import { describe, expect, it } from 'vitest';
import { renderJson } from '../../src/output/json-table.js';
import { renderColumns } from '../../src/output/result-column.js';
import { summaryColumns } from '../../src/output/summary-csv.js';
import { answerStudy } from '../../src/questions/answer-study.js';
import { madeUpCandidate, madeUpStore, madeUpStudy } from '../questions/made-up-study.js';

const TITLE = 'Hütte \u001b[31m\u202e\ud83d\udd0b';
const study = madeUpStudy({
  title: TITLE,
  instances: 2,
  candidates: [madeUpCandidate('strings'), madeUpCandidate('cross', { wiring: 'cross-linked' })],
  acceptance: [{ measure: 'load_lost', statistic: 'share_of_banks', bound: 'at-most', limit: 6 }],
});
const store = madeUpStore(study, [
  { load_lost: [0, 1, 0], lost_capacity: [0, 1, 2] },
  { load_lost: [0, 0, 0], lost_capacity: [0, 1, 1] },
]);

describe('JSON on stdout', () => {
  it('is one document with the rows and names of summary.csv', async () => {
    const answers = await answerStudy(study, store);
    const document = JSON.parse(renderJson(answers, study));
    const head = (await renderColumns(summaryColumns(95), [])).trim().split(',');
    expect(document.summary).toHaveLength(answers.summary.length);
    for (const row of document.summary) expect(Object.keys(row)).toEqual(head);
    expect(document.by_cycle).toHaveLength(answers.byCycle.length);
    expect(document.comparisons).toHaveLength(answers.comparisons.length);
  });

  it('holds what the table says besides', async () => {
    const document = JSON.parse(renderJson(await answerStudy(study, store), study));
    expect(document).toMatchObject({
      title: TITLE,
      seed: '7',
      instances: 2,
      confidence_percent: 95,
      verdict_confidence_percent: 95,
      enough: null,
      reference: 'strings',
      hardest_case: { candidate: 'strings', instance: 2, lost_capacity_percent: 2, load_lost_days: null },
    });
    expect(document.verdicts[0]).toEqual({
      candidate: 'strings',
      verdict: 'not decided',
      lines: [
        {
          measure: 'load_lost',
          statistic: 'share_of_banks',
          bound: 'at_most',
          limit: 6,
          verdict: 'not decided',
          // By hand: two of three with the event begin at 9.4 %, beyond 6 %.
          would_decide: 3,
          least_banks: null,
        },
      ],
    });
  });

  it('is ASCII, so that a title cannot act on a terminal', async () => {
    expect(renderJson(await answerStudy(study, store), study)).toMatch(/^[\n -~]+$/);
  });

  it('calls nothing safe', async () => {
    expect(renderJson(await answerStudy(study, store), study)).not.toMatch(/safe/i);
  });

  it('has null where nothing is known', async () => {
    const nothing = madeUpStore(study, [{ load_lost: [null, null] }, { load_lost: [null, null] }]);
    const document = JSON.parse(renderJson(await answerStudy(study, nothing), study));
    expect(document.hardest_case).toBeNull();
    for (const row of document.summary) expect(row.estimate).toBeNull();
  });
});
