import { describe, expect, it } from 'vitest';
import { studyOf, studyWith } from './study-under-test.js';

const MODULES = 'modules: [[A1, A2], [A3, A4]]';
const equalisersOf = (candidates: string, more = '') =>
  studyOf(studyWith({ candidates, more })).candidates.map(({ equaliser }) => equaliser);

describe('an equaliser', () => {
  it('has defaults for what it does not say, and works above 13.6 V per four cells', () => {
    expect(equalisersOf(`  a: {wiring: strings, ${MODULES}, equaliser: {current_A: 10}}`)).toEqual([
      { currentA: 10, startV: 0.02, fullV: 0.1, efficiency: 0.9, standbyA: 0.005, enableV: 27.2 },
    ]);
  });

  it('is taken from the bank key by key, left out by null and by packs with one BMS', () => {
    const [a, b, c, d] = equalisersOf(
      `  a: {wiring: cross-linked, ${MODULES}, equaliser: {enable_V: null}}
  b: {wiring: strings, ${MODULES}, equaliser: null}
  c: {wiring: native, ${MODULES}}
  d: {wiring: strings, modules: [[A1], [A2]]}`,
      'bank: {equaliser: {start_mV: 30}}\n',
    );
    expect(a).toMatchObject({ startV: 0.03, enableV: null });
    expect([b, c, d]).toEqual([undefined, undefined, undefined]);
  });

  it('leaves no key in a candidate without one', () => {
    const [candidate] = studyOf(studyWith({ candidates: `  a: {wiring: strings, ${MODULES}}` })).candidates;
    expect(Object.keys(candidate ?? {})).not.toContain('equaliser');
  });
});
