import { describe, expect, it } from 'vitest';
import { runStudy } from '../plausibility/run-study.js';

/** Twenty easy cycles, then five in which a module of 100 Ah is asked for 150 Ah after a full charge. Invented. */
function studyOver(cycles: number): string {
  return `motleybank: 1
instances: 1
cycles: ${cycles}
stock:
  one: {defaults: {capacity_Ah: 100, arrival_charge_percent: 90}, modules: {A: {}}}
duty:
  parts:
    - {name: summer, repeat: 20, phases: [{charge: to-full, at_most_h: 6}, {discharge_A: 20, for_h: 1}]}
    - {name: dark, repeat: 5, phases: [{charge: to-full, at_most_h: 6}, {discharge_A: 50, for_h: 3}]}
candidates:
  strings: {wiring: strings, modules: [[A]], load: {disconnect_V: null}}
`;
}

const bankOver = (cycles: number) => runStudy(studyOver(cycles)).strings.banks[0];

describe('a year of parts', () => {
  // By hand: a turn is 25 cycles. Dark are 21 to 25, 46 to 50 and 71 to 75; in each the module is empty after two hours.
  it.each([
    // The last 30 of 60 are 31 to 60: 46 to 50.
    [60, 10, 5],
    // The last 30 of 75 are 46 to 75: 46 to 50 and 71 to 75.
    [75, 15, 10],
    // The last 30 of 77 are 48 to 77: 48 to 50 and 71 to 75.
    [77, 15, 8],
  ])(
    'over %i cycles goes on from the start: load lost on %i, early cutoffs on %i of the last 30',
    (cycles, lost, cut) => {
      const bank = bankOver(cycles);
      expect(bank('load_lost_days')).toBe(lost);
      expect(bank('early_cutoff_on_discharge_cycles')).toBeCloseTo((100 * cut) / 30, 9);
    },
  );

  it('has nothing to tell where the horizon ends before the dark part', () => {
    const bank = bankOver(20);
    expect([bank('load_lost_days'), bank('early_cutoff_on_discharge')]).toEqual([0, 0]);
  });
});
