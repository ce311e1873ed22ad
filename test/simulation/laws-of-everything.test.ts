import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { bankWithEverything } from './bank-with-everything.js';
import { accountsOf } from './hand-kept-accounts.js';
import { dice } from './random-bank.js';

describe('the balances of banks with every option at once', () => {
  it('close for the charge of every cell and for the energy at the bus, and are those of the account', () => {
    let counted = 0;
    const everything = new Set<string>();
    fc.assert(
      fc.property(dice, dice, (rolls, more) => {
        const { sums, charge, left, capacityAs, seen, leapt, account } = accountsOf(bankWithEverything(rolls, more));
        if (leapt) return;
        counted++;
        for (const one of seen) everything.add(one);
        capacityAs.forEach((capacity, c) => {
          const slackAs = charge.slackAs[c];
          // What a step has passed is what it books, but for rounding.
          expect(Math.abs(charge.gainedAs[c] - charge.passedAs[c])).toBeLessThan(slackAs + 1e-9 * capacity);
          // Currents inside a step are interpolated: see the balances of random banks.
          expect(Math.abs(charge.gainedAs[c] - charge.currentAs[c])).toBeLessThan(slackAs + 2e-4 * capacity);
          // From the start of the course to its end, with what went with capacity.
          const booked = charge.passedAs[c] + charge.visitedAs[c] - charge.fadedAs[c];
          expect(Math.abs(charge.endAs[c] - charge.startAs[c] - booked)).toBeLessThan(slackAs + 1e-9 * capacity);
          expect(Math.abs(charge.saidToHaveFadedAs[c] - charge.fadedAs[c])).toBeLessThan(1e-9 * capacity);
        });
        const lostJ = sums.cellsJ + sums.pathsJ + sums.wiringJ + sums.devicesJ;
        const missingJ = Math.abs(sums.busJ - sums.storedJ - lostJ) - sums.slackJ;
        // The bus voltage bows within a step, which the rules of Simpson and Gauss follow unlike: up to 1e-5 of what passes.
        expect(missingJ).toBeLessThan(5e-5 * sums.turnoverJ + 30);
        // The law of the devices by their terminal voltages, within the reach of the events at which they change region.
        expect(sums.strayAs).toBeLessThan(5e-5 * sums.throughputAs + 1);
        // The account takes the bus voltage of a step as straight: what it bows by is missed, both ways.
        expect(Math.abs(3600 * (account.inWh - account.outWh) - sums.busJ)).toBeLessThan(2e-4 * sums.turnoverJ + 5);
        expect(Math.abs(3600 * account.wiringWh - sums.wiringJ)).toBeLessThan(1e-3 * sums.wiringJ + 5);
        // Two points of Gauss's rule in a step against three.
        expect(Math.abs(3600 * account.equaliserWh - sums.devicesJ)).toBeLessThan(1e-3 * sums.devicesJ + 5);
        expect(account.visits).toBe(2);
        // All age, some by a tenth.
        expect(Math.max(...left)).toBeLessThan(1);
        expect(Math.min(...left)).toBeLessThan(0.99);
      }),
      { seed: 151, numRuns: 25, endOnFailure: true },
    );
    expect(counted).toBeGreaterThan(20);
    for (const kind of ['over-voltage', 'under-voltage', 'over-current-charge', 'over-current-discharge']) {
      expect([...everything]).toContain(`${kind}-trip`);
    }
    for (const one of ['cold-charge-refusal', 'cold-charge-release', 'load-disconnect', 'charge-ended', 'bleed']) {
      expect([...everything]).toContain(one);
    }
    for (const region of ['at rest', 'in proportion', 'at its limit'])
      expect([...everything]).toContain(`device ${region}`);
  });
});
