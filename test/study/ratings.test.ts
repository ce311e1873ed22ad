import { describe, expect, it } from 'vitest';
import { ratingsOfModules } from '../../src/study/ratings.js';
import { read, studyOf } from './study-under-test.js';

const study = (stock: string, more = ''): string => `motleybank: 1
stock:
  made: {modules: [A1, A2, A3, A4], rated_Ah: 100${stock}}
  like-it: {modules: [B1, B2], like: made}
  measured:
    defaults: {capacity_Ah: 100${stock}}
    modules: {C1: {}, C2: {ratings: {peak_A: 300}}}
duty: {phases: [{rest_h: 1}]}
candidates:
  four: {wiring: strings, modules: [[A1, A2], [B1, B2], [C1, C2]]${more}}
`;

describe('ratings', () => {
  const stated = ', ratings: {peak_A: 200, continuous_A: 100, blocking_V: 60}';

  it('of modules come from their stock, key by key', () => {
    const read = studyOf(study(stated));
    const candidate = read.candidates[0];
    if (candidate === undefined) throw new Error('no candidate');
    const ratings = ratingsOfModules(read, candidate).flat();
    expect(ratings.map((rating) => rating?.peakA)).toEqual([200, 200, 200, 200, 200, 300]);
    expect(ratings[5]).toEqual({
      continuousA: 100,
      peakA: 300,
      blockingV: 60,
      mostInSeries: null,
      mostInParallel: null,
    });
  });

  it('are absent from the resolved study where none is stated', () => {
    const { stocks, candidates } = studyOf(study(''));
    expect(stocks[0]).not.toHaveProperty('ratings');
    expect(candidates[0]).not.toHaveProperty('ratings');
    expect(studyOf(study('', ', ratings: {lead_A: 250, fuse_breaking_A: 6000}')).candidates[0]?.ratings).toEqual({
      leadA: 250,
      linkA: null,
      fuseA: null,
      fuseBreakingA: 6000,
    });
  });

  it('warn of counts beyond them, not of counts at them', () => {
    const warnings = (counts: string): string => {
      const result = read(study(`, ratings: {${counts}}`));
      return result.kind === 'read' ? result.warnings.join('\n') : 'refused';
    };
    expect(warnings('most_in_series: 2, most_in_parallel: 3')).not.toMatch(/maker/);
    expect(warnings('most_in_series: 1, most_in_parallel: 2')).toMatch(
      /2 modules in series, but the maker of one allows 1: take .+ \(four\)\n3 strings in parallel, but the maker of one allows 2: take .+ \(four\)/,
    );
  });
});
