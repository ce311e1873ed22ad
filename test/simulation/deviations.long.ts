import { describe, expect, it } from 'vitest';
import { referenceBanks } from '../reference/banks.js';
import { chargeDifference, compareEvents } from '../reference/contract.js';
import { optionBanks } from '../reference/option-banks.js';
import { simulateSlowBank, TRUSTED_STEPS } from '../reference/slow-bank.js';
import { runEngine } from './engine-run.js';

/** What `truth.test.ts` holds to limits, printed: one line for each bank. */
describe('deviations of the engine from the slow rewrite', () => {
  it.each([...referenceBanks(), ...optionBanks()].map((bank) => [bank.name, bank] as const))('%s', (name, bank) => {
    const slow = simulateSlowBank(bank, { ...TRUSTED_STEPS, nodeLeakS: 0 });
    const fast = runEngine(bank);
    const charge = Math.max(...chargeDifference(fast.cycleEndCharge, slow.cycleEndCharge));
    const events = compareEvents(fast.events, slow.events, slow.segmentStartS);
    const unmatched = fast.events.length - slow.events.length;
    process.stdout.write(
      `${name}: charge ${charge.toExponential(1)}; ${slow.events.length} events, latest or earliest by ${events.timeS.toFixed(2)} s\n`,
    );
    expect(unmatched).toBe(0);
  });
});
