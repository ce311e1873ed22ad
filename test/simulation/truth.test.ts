import { describe, expect, it } from 'vitest';
import { referenceBanks } from '../reference/banks.js';
import { chargeDifference, compareEvents } from '../reference/contract.js';
import { simulateSlowBank, TRUSTED_STEPS } from '../reference/slow-bank.js';
import { runEngine } from './engine-run.js';

describe('the engine against the slow rewrite', () => {
  for (const bank of referenceBanks()) {
    it(bank.name, () => {
      const t0 = performance.now();
      const slow = simulateSlowBank(bank, TRUSTED_STEPS);
      const t1 = performance.now();
      const fast = runEngine(bank);
      const t2 = performance.now();
      const d = chargeDifference(fast.cycleEndCharge, slow.cycleEndCharge);
      const e = compareEvents(fast.events, slow.events, slow.segmentStartS);
      console.log(bank.name, d.map((x) => x.toExponential(2)).join(' '), e.timeS.toFixed(2), e.faults.slice(0, 6), slow.events.length, fast.journey.steps, (t1 - t0).toFixed(0), (t2 - t1).toFixed(0));
      expect(Math.max(...d)).toBeLessThan(2e-4);
    });
  }
});
