import { describe, expect, it } from 'vitest';
import { runStudy } from '../plausibility/run-study.js';

/** A module of 100 Ah with an over-current limit of 100 A for 10 s; load 100 W with a peak at its end. Invented. */
function cutoffsWith(peakW: number, peakS: number): readonly number[] {
  const bank = runStudy(`motleybank: 1
instances: 1
cycles: 3
stock:
  one: {defaults: {capacity_Ah: 100, arrival_charge_percent: 90}, modules: {A: {}}}
duty: {phases: [{charge: to-full, at_most_h: 4}, {discharge_W: 100, for_h: 2, load_peak_W: ${peakW}, peak_s: ${peakS}}]}
candidates:
  strings: {wiring: strings, modules: [[A]], load: {disconnect_V: null}}
`).strings.banks[0];
  return [bank('early_cutoff_on_discharge_ever'), bank('load_lost_days')];
}

describe('a peak of load', () => {
  // By hand: a bank of 12 to 13.3 V carries 1800 W with 135 to 150 A, 900 W with at most 75 A.
  it('trips on over-current where it is high and lasts longer than the delay', () => {
    expect(cutoffsWith(1800, 20)).toEqual([1, 3]);
  });

  it('passes where it ends before the delay, or is below the limit', () => {
    expect(cutoffsWith(1800, 5)).toEqual([0, 0]);
    expect(cutoffsWith(900, 20)).toEqual([0, 0]);
  });
});
