import { describe, expect, it } from 'vitest';
import { runStudy } from './run-study.js';

/** A pair at rest for thirty days whose modules draw so many mA for themselves; nothing else drains them. */
const atRest = (firstMA: number, secondMA: number) => {
  const { strings } = runStudy(`motleybank: 1
instances: 1
cycles: 30
drift_limit_percent: 20
stock:
  house:
    defaults: {capacity_Ah: 100, leakage_mA: 0}
    modules: {A1: {standby_mA: ${firstMA}}, A2: {standby_mA: ${secondMA}}}
duty: {phases: [{rest_h: 24}]}
candidates:
  strings: {wiring: strings, modules: [[A1, A2]]}
`);
  const [bank] = strings?.banks ?? [];
  if (bank === undefined) throw new RangeError('no bank was simulated');
  return bank;
};

describe('a pair at rest for 30 days', () => {
  it('drifts 7.20 Ah apart with standby currents of 5 and 15 mA', () => {
    // By hand: 10 mA x 720 h. On a bank of 100 Ah, percent are Ah.
    expect(atRest(5, 15)('drift_at_cycle_30')).toBeCloseTo(7.2, 9);
  });

  it('does not drift with equal standby currents of whatever size', () => {
    for (const standbyMA of [0, 5, 50]) expect(atRest(standbyMA, standbyMA)('drift_at_cycle_30')).toBe(0);
  });

  it('passes 20 Ah in its 17th day with 50 mA more in one module', () => {
    // By hand: 20 Ah / 50 mA = 400 h = 16.7 days.
    const bank = atRest(5, 55);
    expect(bank('drift_past_limit_first_cycle')).toBe(17);
    expect(bank('drift_at_cycle_16')).toBeCloseTo(0.05 * 24 * 16, 9);
  });
});
