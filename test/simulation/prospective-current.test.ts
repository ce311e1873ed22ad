import { describe, expect, it } from 'vitest';
import { buildBank } from '../../src/bank/bank.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { prospectiveCurrent, prospectiveOf } from '../../src/simulation/prospective-current.js';
import { bankOf } from '../reference/bank-of.js';
import { bareModule, straightTable } from '../reference/bare-module.js';
import { studyOf, studyWith } from '../study/study-under-test.js';

describe('the prospective short-circuit current', () => {
  it('of two strings of two 6 mOhm modules with 1.5 mOhm leads is about 4 kA', () => {
    // By hand: a full cell of the default curve has 3.65 V, a string of eight 29.2 V; 4 x 0.8 + 1.5 + 1.3 = 6 mOhm a
    // module, 13.5 mOhm a string: 2162.96 A, twice that at the bus. At 27 V on load it would be 4000 A.
    const study = studyOf(studyWith({}));
    const { bankA, stringA, fuseA } = prospectiveCurrent(study, study.candidates[0]);
    expect(bankA).toBeCloseTo((2 * 29.2) / 0.0135, 3);
    expect(stringA[0]).toBeCloseTo(29.2 / 0.0135, 3);
    expect(stringA[1]).toBeCloseTo(29.2 / 0.0135, 3);
    expect(fuseA).toBeCloseTo(29.2 / 0.0135, 3);
  });

  it('of unlike strings asks most of the fuse of the weaker one, into which the stronger ones feed', () => {
    // By hand, modules of 13 V full: 13 / 0.01 = 1300, 13 / 0.02 = 650, 13 / 0.02 = 650 A; behind the fuse of a weaker
    // string the others feed 1950 A.
    const modules = [0.01, 0.02, 0.02].map((ohm, s) => [bareModule(`m${s}`, { pathResistanceOhm: ohm })]);
    const leads = modules.map(() => ({ negativeOhm: 0, betweenOhm: 0, positiveOhm: 0 }));
    const { candidate } = bankOf('three', { modules, cycles: [], leads });
    const named = new Map(modules.flat().map((module) => [module.id, module]));
    const { bankA, stringA, fuseA } = prospectiveOf(
      buildBank(candidate, named, compileOcvCurves([straightTable(12, 1)])),
    );
    expect(bankA).toBeCloseTo(2600, 6);
    [1300, 650, 650].forEach((amperes, s) => {
      expect(stringA[s]).toBeCloseTo(amperes, 6);
    });
    expect(fuseA).toBeCloseTo(1950, 6);
  });
});
