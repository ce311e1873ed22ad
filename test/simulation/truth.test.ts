import { describe, expect, it } from 'vitest';
import { referenceBanks } from '../reference/banks.js';
import { chargeDifference, compareEvents } from '../reference/contract.js';
import { referenceDuty, repeated } from '../reference/duties.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { simulateSlowBank, TRUSTED_STEPS } from '../reference/slow-bank.js';
import { runEngine } from './engine-run.js';

/** Largest difference of charge fraction that the engine promises against the truth, also after 180 cycles. */
const PROMISED = 2e-4;
/** Events are compared to find missing and wrong ones; a slow crossing may be off by seconds without harm to charge. */
const eventToleranceS = (): number => 10;

describe('the engine against the independent slow rewrite of the physics', () => {
  it.each(referenceBanks().map((bank) => [bank.name, bank] as const))('%s', (_, bank) => {
    const slow = simulateSlowBank(bank, { ...TRUSTED_STEPS, nodeLeakS: 0 });
    const fast = runEngine(bank);
    const charge = chargeDifference(fast.cycleEndCharge, slow.cycleEndCharge);
    expect(Math.max(...charge)).toBeLessThan(PROMISED);
    const events = compareEvents(fast.events, slow.events, slow.segmentStartS, eventToleranceS);
    expect(events.faults).toEqual([]);
  });

  it.each(['2s2p-strings', '2s2p-cross-linked'])(
    'does not grow its error over 180 cycles: %s',
    (name) => {
      const bank = withManyCycles(name, 180);
      const slow = simulateSlowBank(bank, { ...TRUSTED_STEPS, nodeLeakS: 0 });
      const fast = runEngine(bank);
      const charge = chargeDifference(fast.cycleEndCharge, slow.cycleEndCharge);
      expect(Math.max(...charge)).toBeLessThan(PROMISED);
      const quarter = (from: number): number => Math.max(...charge.slice(from, from + 45));
      expect(quarter(135)).toBeLessThan(3 * Math.max(quarter(0), 1e-5));
    },
    240_000,
  );
});

function withManyCycles(name: string, cycles: number): ReferenceBank {
  const bank = referenceBanks().find((candidate) => candidate.name === name);
  if (bank === undefined) throw new Error(`no reference bank ${name}`);
  return { ...bank, cycles: repeated(referenceDuty(4), cycles) };
}
