import { describe, expect, it } from 'vitest';
import { oracleBanks } from './oracle-bank.js';
import { faultsOf } from './render-oracle.js';

/** Some of the suite; `npm run oracle` runs all of it. */
const QUICK = ['outside-b', '01-1S2P', '19-1S2P', '28-1S2P'];

// A general-purpose circuit simulator runs the deck of each bank; of the outside bank the outside deck too, and both are
// held against the outside run. Limits: test/reference/contract.ts.
describe('the engine beside a circuit simulator', () => {
  it.each(QUICK)('agrees with it on bank %s', { timeout: 600_000 }, async (name) => {
    const bank = oracleBanks().find((one) => one.name === name);
    if (bank === undefined) throw new Error(`no bank ${name}`);
    const result = await bank.simulate();
    expect(faultsOf(result)).toEqual([]);
    expect(result.engineAndDeck.agreement.waveform.comparedSamples).toBeGreaterThan(100);
    expect(result.engineAndDeck.traced.events.length).toBeGreaterThanOrEqual(2);
  });
});
