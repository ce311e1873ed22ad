import { describe, expect, it } from 'vitest';
import { periodWords, windowWords } from '../../src/output/period-words.js';
import { madeUpStudy } from '../questions/made-up-study.js';

describe('names of cycles', () => {
  it('are days if a cycle is one day by the clock', () => {
    const { duty } = madeUpStudy();
    expect(periodWords(madeUpStudy()).many).toBe('days');
    expect(periodWords(madeUpStudy({ duty: { ...duty, kind: 'phases' } })).many).toBe('cycles');
    expect(periodWords(madeUpStudy({ duty: { ...duty, cycleS: 3600 } })).one).toBe('cycle');
  });

  it('say which of them a figure speaks of', () => {
    const days = { one: 'day', many: 'days' };
    expect(windowWords(1, 180, 180, days)).toBe('in 180 days');
    expect(windowWords(151, 180, 180, days)).toBe('last 30 days');
    expect(windowWords(180, 180, 180, days)).toBe('on day 180');
    expect(windowWords(1, 1, 1, days)).toBe('on day 1');
    expect(windowWords(1, 7, 180, days)).toBe('days 1 to 7');
  });
});
