import { describe, expect, it } from 'vitest';
import { buildBank } from '../../src/bank/bank.js';
import { pastBleedSwitch } from '../../src/bank/bleed.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import type { BleedSettings } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { bareModule, straightTable } from '../reference/bare-module.js';

/** Start 3.45 V, stop 3.43 V, delta 10 mV. */
function bankWith(sketch: Partial<BleedSettings>) {
  const bleed: BleedSettings = { rule: 'each', when: 'always', stopBelowStartV: 0.02, deltaV: 0.01, ...sketch };
  const module = bareModule('m', { bleedA: 0.05, bleedStartV: 3.45 }, { bleed });
  const { candidate } = bankOf('one', { modules: [[module]], cycles: [] });
  return buildBank(candidate, new Map([['m', module]]), compileOcvCurves([straightTable(3, 1)]));
}

describe('pastBleedSwitch', () => {
  // Columns: rule, when, bled before, cell V, lowest V, current A, bleeds now. By the rule as stated, threshold by
  // threshold; lowest far off where it plays no part.
  it.each([
    ['none', 'always', true, 3.6, 3.0, 5, false],
    ['each', 'always', false, 3.45, 3.45, 0, true],
    ['each', 'always', false, 3.449, 3.449, 0, false],
    ['each', 'always', true, 3.44, 3.44, 0, true],
    ['each', 'always', true, 3.43, 3.43, 0, false],
    ['each', 'charging', false, 3.5, 3.5, 0.009, false],
    ['each', 'charging', false, 3.5, 3.5, 0.02, true],
    ['each', 'charging', true, 3.5, 3.5, -1, false],
    ['above-lowest', 'always', false, 3.47, 3.461, -5, false],
    ['above-lowest', 'always', false, 3.47, 3.459, -5, true],
    ['above-lowest', 'always', false, 3.44, 3.3, 0, false],
    ['above-lowest', 'always', true, 3.47, 3.464, 0, true],
    ['above-lowest', 'always', true, 3.47, 3.466, 0, false],
    ['above-lowest', 'always', true, 3.42, 3.3, 0, false],
    ['above-lowest', 'charging', false, 3.47, 3.4, 0, false],
  ] as const)('%s, %s: from %s at %d V, lowest %d V, %d A: %s', (rule, when, was, cellV, lowestV, currentA, now) => {
    const past = pastBleedSwitch(bankWith({ rule, when }), 0, was, cellV, lowestV, currentA);
    expect(past >= 0).toBe(was !== now);
  });

  it('says how far: the condition that is missed most to start, the one passed furthest to stop', () => {
    // By hand: 20 mV above the start, but 4 of 10 mV above the lowest; 10 mV above the stop, but 1 mV below half of delta.
    const bank = bankWith({ rule: 'above-lowest' });
    expect(pastBleedSwitch(bank, 0, false, 3.47, 3.466, 0)).toBeCloseTo(-0.006, 12);
    expect(pastBleedSwitch(bank, 0, true, 3.44, 3.436, 0)).toBeCloseTo(0.001, 12);
  });
});
