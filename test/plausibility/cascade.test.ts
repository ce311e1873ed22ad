import { describe, expect, it } from 'vitest';
import { studyOf } from '../study/study-under-test.js';
import { runStudy, traceBank } from './run-study.js';

const BANKS = 32;

/** Two sampled modules in parallel of which B1 refuses from the first ampere on; A1 may carry 100 A for 10 s. */
const study = (loadA: number) => `motleybank: 1
seed: 6
instances: ${BANKS}
cycles: 1
stock:
  house:
    grade: new-same-make
    rated_Ah: 100
    modules: [A1]
    arrival_charge_percent: {nominal: 80}
  open:
    like: house
    modules: [B1]
    bms: {over_current: {discharge_A: 1, delay_s: 0, lock_after: 1, lock: manual}}
duty: {phases: [{discharge_A: ${loadA}, for_h: 0.1}]}
candidates:
  strings: {wiring: strings, modules: [[A1], [B1]]}
`;

describe('two modules in parallel, one of them open', () => {
  it('serve 80 A by the other alone: a string is lost, no load', () => {
    // By hand: 80 A is below the 100 A that the other may carry.
    const { strings } = runStudy(study(80));
    expect(strings?.banks).toHaveLength(BANKS);
    for (const bank of strings?.banks ?? []) {
      expect(bank('string_lost')).toBe(1);
      expect(bank('load_lost')).toBe(0);
      expect(bank('over_current_trips')).toBe(1);
      expect(bank('energy_not_supplied')).toBe(0);
    }
  });

  it('trip the other within 10 to 11 s under 120 A and lose the load, whatever the spread', () => {
    // By hand: 120 A is above 100 A at once, the delay is 10 s; nothing in a module of this grade makes it later.
    const { strings } = runStudy(study(120));
    for (const bank of strings?.banks ?? []) expect(bank('load_lost')).toBe(1);
    const read = studyOf(study(120));
    for (let instance = 1; instance <= BANKS; instance++) {
      const { events } = traceBank(read, { instance });
      const trip = events.find(({ kind, module }) => kind === 'over-current-discharge-trip' && module === 0);
      expect(trip?.timeS).toBeGreaterThanOrEqual(10);
      expect(trip?.timeS).toBeLessThan(11);
      expect(events.find(({ kind }) => kind === 'load-lost')?.timeS).toBe(trip?.timeS);
    }
  });
});
