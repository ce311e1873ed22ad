import { describe, expect, it } from 'vitest';
import { measureChoices } from '../../src/commands/measure-choices.js';
import { readStudy } from '../../src/study/read-study.js';
import { simulationKey } from '../../src/study/simulation-key.js';
import { studyOf, studyWith } from './study-under-test.js';

const WATCH =
  'watch: [{measure: load_lost, half_width_points: 2}, {measure: drift_growth, statistic: mean, half_width_points_per_month: 0.1}]';
const looked = (instances: number, more = '') =>
  studyWith({ more: `instances: ${instances}\nenough: {${WATCH}${more}}\n` });

describe('the section enough', () => {
  it('looks after 16 blocks and then twice as many each, last at all instances', () => {
    // By hand: 16 blocks of 32 are 512.
    expect(studyOf(looked(4000)).enough).toEqual({
      looks: [512, 1024, 2048, 4000],
      watched: [
        { measure: 'load_lost', statistic: 'share_of_banks', halfWidth: 2 },
        { measure: 'drift_growth', statistic: 'mean', halfWidth: 0.1 },
      ],
    });
  });

  it('looks where the study says', () => {
    expect(studyOf(looked(4000, ', looks: [512, 544, 3200]')).enough?.looks).toEqual([512, 544, 3200, 4000]);
  });

  it('leaves out looks that a smaller number of the command line does not reach', () => {
    const result = readStudy(looked(4000), {
      fileName: 'study.yaml',
      readText: () => ({ problem: 'no such file' }),
      measures: measureChoices(),
      overrides: { instances: 600 },
    });
    expect(result.kind === 'refused' ? result.problems : result.study.enough?.looks).toEqual([512, 600]);
  });

  it('changes no outcome: the simulation key is that without it', () => {
    const [one, other] = [studyOf(looked(4000)), studyOf(studyWith({ more: 'instances: 4000\n' }))];
    expect(simulationKey(one, one.candidates[0])).toBe(simulationKey(other, other.candidates[0]));
    expect(other).not.toHaveProperty('enough');
  });
});
