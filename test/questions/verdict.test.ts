import { describe, expect, it } from 'vitest';
import type { SummaryRow } from '../../src/questions/answers.js';
import { joinedVerdict, judgeCandidates, judgeLine } from '../../src/questions/verdict.js';
import type { AcceptanceLine } from '../../src/study/study.js';
import { madeUpStore, madeUpStudy } from './made-up-study.js';

const LOSS: AcceptanceLine = { measure: 'load_lost', statistic: 'share_of_banks', bound: 'at-most', limit: 6 };
const CAPACITY: AcceptanceLine = {
  measure: 'usable_capacity',
  statistic: 'percentile_5',
  bound: 'at-least',
  limit: 90,
};
const DRIFT: AcceptanceLine = { measure: 'drift', statistic: 'percentile_95', bound: 'at-most', limit: 10 };

function row(line: AcceptanceLine, interval: readonly [number, number] | null, note = ''): SummaryRow {
  const [lower, upper] = interval ?? [null, null];
  return {
    candidate: 'strings',
    measure: line.measure,
    fromCycle: 1,
    toCycle: 180,
    statistic:
      line.statistic === 'share_of_banks'
        ? 'share_of_banks'
        : line.statistic === 'percentile_5'
          ? 'percentile_5'
          : 'percentile_95',
    unit: '%',
    estimate: lower === null || upper === null ? null : (lower + upper) / 2,
    lower,
    upper,
    method: 'wilson',
    note,
    instances: 512,
  };
}

function verdictOf(...put: readonly (readonly [AcceptanceLine, readonly [number, number] | null, string?])[]) {
  const lines = put.map(([line, interval, note]) => judgeLine(line, row(line, interval, note)));
  return { verdict: joinedVerdict(lines), lines };
}

describe('verdict', () => {
  it('meets a line if the whole interval keeps to it, the limit itself included', () => {
    expect(verdictOf([LOSS, [2, 6]]).verdict).toBe('meets');
    expect(verdictOf([CAPACITY, [90, 95]]).verdict).toBe('meets');
  });

  it('fails a line if the whole interval is beyond it', () => {
    expect(verdictOf([LOSS, [6.1, 9]]).verdict).toBe('fails');
    expect(verdictOf([CAPACITY, [80, 89.9]]).verdict).toBe('fails');
  });

  it('does not decide a line that the interval straddles, or without an interval', () => {
    expect(verdictOf([LOSS, [5, 7]]).verdict).toBe('not decided');
    expect(verdictOf([DRIFT, null, 'not estimable from 10']).verdict).toBe('not decided');
  });

  it('meets with all lines, fails with one', () => {
    expect(verdictOf([LOSS, [1, 2]], [CAPACITY, [91, 92]]).verdict).toBe('meets');
    expect(verdictOf([LOSS, [1, 2]], [CAPACITY, [89, 92]]).verdict).toBe('not decided');
    expect(verdictOf([LOSS, [5, 7]], [CAPACITY, [80, 82]]).verdict).toBe('fails');
  });

  it('lets a line that the wiring cannot have decide nothing', () => {
    const none = 'not applicable: one BMS over the full series length';
    expect(verdictOf([LOSS, [1, 2]], [DRIFT, null, none]).verdict).toBe('meets');
    expect(verdictOf([LOSS, [5, 7]], [DRIFT, null, none]).verdict).toBe('not decided');
    const alone = verdictOf([DRIFT, null, none]);
    expect(alone.verdict).toBe('not applicable');
    expect(alone.lines).toEqual(['not applicable']);
  });

  it('gives no verdict without acceptance lines', () => {
    expect(verdictOf()).toEqual({ verdict: null, lines: [] });
  });

  it('refuses a line on what is never estimated', async () => {
    const judge = (line: AcceptanceLine) => {
      const study = madeUpStudy({ acceptance: [line] });
      return judgeCandidates(study, madeUpStore(study, [{}, {}]));
    };
    await expect(judge({ ...LOSS, statistic: 'mean' })).rejects.toThrow('strings has no mean of load_lost');
    await expect(judge({ ...LOSS, measure: 'none' })).rejects.toThrow('no measure none');
  });
});
