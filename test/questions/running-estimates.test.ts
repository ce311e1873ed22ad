import { describe, expect, it } from 'vitest';
import { MEASURES } from '../../src/measures/registry.js';
import { outcomeLayout } from '../../src/outcomes/block.js';
import { encodeBlock } from '../../src/outcomes/block-csv.js';
import { type OutcomeRow, outcomeColumns } from '../../src/outcomes/columns.js';
import { MemoryOutcomes } from '../../src/outcomes/memory-outcomes.js';
import { renderRunning } from '../../src/output/running-text.js';
import { answerStudy } from '../../src/questions/answer-study.js';
import { RunningEstimates } from '../../src/questions/running-estimates.js';
import { madeUpStudy } from './made-up-study.js';

const STUDY = madeUpStudy({
  instances: 250,
  blockSize: 100,
  acceptance: [
    { measure: 'lost_capacity', statistic: 'percentile_95', bound: 'at-most', limit: 10 },
    { measure: 'load_lost', statistic: 'share_of_banks', bound: 'at-most', limit: 6 },
    { measure: 'load_lost', statistic: 'share_of_banks', bound: 'at-most', limit: 1 },
  ],
});
const columns = STUDY.candidates.map((candidate) => outcomeColumns(outcomeLayout(STUDY, candidate)));
const events = new Set(MEASURES.filter(({ kind }) => kind === 'event').map(({ name }) => name as string));

/** Any values at all: events now and then, amounts of any size, some absent. */
function row(candidate: number, instance: number): OutcomeRow {
  const values = (columns[candidate] ?? []).map(({ name }, place) => {
    const number = (instance * 7919 + place * 104_729 + candidate * 31) % 1000;
    if (events.has(name)) return number < 130 ? 1 : 0;
    return number < 20 ? null : number / 50;
  });
  return { instance, values };
}

const rowsOf = (candidate: number, first: number, last: number) =>
  Array.from({ length: last - first + 1 }, (_, index) => row(candidate, first + index));

function takeNext(estimates: RunningEstimates): void {
  const block = estimates.next[0]?.block ?? 0;
  const range = { first: (block - 1) * 100 + 1, last: Math.min(250, block * 100) };
  estimates.take(
    columns.map((own, index) => ({ csv: encodeBlock(own, range, rowsOf(index, range.first, range.last)), failed: [] })),
  );
}

/** What a run of the first banks alone would answer. */
async function answered(instances: number) {
  const outcomes = STUDY.candidates.map(
    ({ key }, index) =>
      [key, { columns: columns[index] ?? [], rows: rowsOf(index, 1, instances), twin: row(index, 0) }] as const,
  );
  const { summary } = await answerStudy(STUDY, new MemoryOutcomes(new Map(outcomes)));
  return summary;
}

describe('estimates of a run that goes on', () => {
  it('are those of a run of the banks so far', async () => {
    const estimates = new RunningEstimates(STUDY);
    expect(estimates.rows()).toEqual([]);
    for (const instances of [100, 200, 250]) {
      takeNext(estimates);
      expect(estimates.instances).toBe(instances);
      const rows = estimates.rows();
      expect(rows.map(({ candidate, measure }) => [measure, candidate])).toEqual([
        ['lost_capacity', 'strings'],
        ['lost_capacity', 'cross'],
        ['load_lost', 'strings'],
        ['load_lost', 'cross'],
      ]);
      const answers = await answered(instances);
      for (const one of rows) expect(answers).toContainEqual(one);
    }
    expect(estimates.next).toEqual([]);
  });

  it('are of cutoffs and lost load where a study has no acceptance lines', () => {
    const { watched } = new RunningEstimates(madeUpStudy());
    expect(watched.map(({ measure }) => measure)).toEqual(['early_cutoff_on_charge', 'load_lost']);
  });

  it('are told in a sentence per measure', () => {
    const estimates = new RunningEstimates(STUDY);
    takeNext(estimates);
    const text = renderRunning(estimates.rows(), estimates.instances).join('\n');
    expect(text).toMatch(
      /^ {2}lost capacity, 1 in 20 worse, %, 100 banks so far: strings [\d.]+ \([\d.]+ to [\d.]+\), cross [\d.]+ \(/,
    );
    const small = new RunningEstimates({ ...STUDY, blockSize: 32 });
    small.take(
      columns.map((own, index) => ({
        csv: encodeBlock(own, { first: 1, last: 32 }, rowsOf(index, 1, 32)),
        failed: [],
      })),
    );
    expect(renderRunning(small.rows(), 32)[0]).toBe('  lost capacity, 1 in 20 worse, %, 32 banks so far: too few');
    expect(text).toMatch(/^ {2}load lost, % of banks, 100 banks so far: strings [\d.]+ \([\d.]+ to [\d.]+\), cross/m);
  });
});
