import { describe, expect, it } from 'vitest';
import { simulationKey } from '../../src/study/simulation-key.js';
import { read, studyOf, studyWith } from './study-under-test.js';

const MODULES = 'modules: [[A1, A2], [A3, A4]]';
const upkeepOf = (written: string, more = '') =>
  studyOf(studyWith({ candidates: `  a: {wiring: strings, ${MODULES}${written}}`, more })).candidates[0]?.upkeep;

describe('upkeep', () => {
  it('comes after cycles, days or at a drift', () => {
    expect(upkeepOf(', upkeep: {every_cycles: 90}')).toEqual({ everyCycles: 90 });
    expect(upkeepOf(', upkeep: {every_days: 30}')).toEqual({ everyS: 2_592_000 });
    expect(upkeepOf(', upkeep: {at_drift_percent: 10}')).toEqual({ driftFraction: 0.1 });
  });

  it('of a candidate replaces that of the bank as a whole, none included', () => {
    const more = 'bank: {upkeep: {every_days: 30}}\n';
    expect(upkeepOf('', more)).toEqual({ everyS: 2_592_000 });
    expect(upkeepOf(', upkeep: {every_cycles: 90}', more)).toEqual({ everyCycles: 90 });
    expect(upkeepOf(', upkeep: null', more)).toBeUndefined();
  });

  it('at a drift said for the bank leaves out candidates that have none between modules', () => {
    const { candidates } = studyOf(
      studyWith({
        candidates: `  a: {wiring: strings, ${MODULES}}\n  b: {wiring: native, ${MODULES}}`,
        more: 'bank: {upkeep: {at_drift_percent: 10}}\n',
      }),
    );
    expect(candidates.map(({ upkeep }) => upkeep)).toEqual([{ driftFraction: 0.1 }, undefined]);
  });

  it('leaves the simulation key of a candidate without it as it was', () => {
    const [plain, none] = ['', ', upkeep: null'].map((written) => {
      const study = studyOf(studyWith({ candidates: `  a: {wiring: strings, ${MODULES}${written}}` }));
      const [candidate] = study.candidates;
      if (candidate === undefined) throw new RangeError('no candidate');
      expect(Object.keys(candidate)).not.toContain('upkeep');
      return simulationKey(study, candidate);
    });
    expect(none).toBe(plain);
  });

  it('is told with its origin', () => {
    const result = read(studyWith({ more: 'bank: {upkeep: {every_days: 30}}\n' }));
    expect(result.kind === 'refused' ? [] : result.origins).toContainEqual({
      path: 'candidates.strings.upkeep.every_days',
      value: '30',
      unit: 'days',
      source: 'bank',
    });
  });
});
