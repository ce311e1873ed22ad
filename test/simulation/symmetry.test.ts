import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Candidate, ModuleParameters } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { referenceDuty, repeated } from '../reference/duties.js';
import { plainModule } from '../reference/plain-module.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { runThrough } from './journey-of.js';
import { dice, randomBankFrom } from './random-bank.js';

/** Charge of the cells of each string after all cycles. */
function chargeOfStrings(bank: ReferenceBank): number[][] {
  const { state } = runThrough(bank).kernel;
  let cell = 0;
  return bank.modules.map((string) => {
    const cells = string.reduce((sum, module) => sum + module.capacityAh.length, 0);
    cell += cells;
    return [...state.charge.subarray(cell - cells, cell)];
  });
}

/** The bank with its strings in another order: string k of it is string `order[k]` of the other. */
function permuted(bank: ReferenceBank, order: readonly number[]): ReferenceBank {
  const { candidate } = bank;
  return {
    ...bank,
    modules: order.map((s) => bank.modules[s]),
    candidate: {
      ...candidate,
      strings: order.map((s) => candidate.strings[s]),
      leads: order.map((s) => candidate.leads[s]),
    },
  };
}

describe('strings in another order', () => {
  it('go through the same', () => {
    // Any order for strings and packs; cross-links run from neighbour to neighbour, so there only the reverse is alike.
    let compared = 0;
    fc.assert(
      fc.property(dice, fc.boolean(), (rolls, reverse) => {
        const bank = randomBankFrom(rolls);
        const count = bank.modules.length;
        if (count < 2) return;
        compared++;
        const turn = bank.candidate.wiring === 'cross-linked' || reverse;
        const order = Array.from({ length: count }, (_, s) => (turn ? count - 1 - s : (s + 1) % count));
        const original = chargeOfStrings(bank);
        chargeOfStrings(permuted(bank, order)).forEach((string, k) => {
          string.forEach((z, c) => {
            // Sums in another order differ in their last digits, and steps and events after them.
            expect(Math.abs(z - original[order[k]][c])).toBeLessThan(2e-5);
          });
        });
      }),
      { seed: 121, numRuns: 30, endOnFailure: true },
    );
    expect(compared).toBeGreaterThan(10);
  });
});

describe('identical modules', () => {
  const module = (id: string): ModuleParameters =>
    plainModule(id, { capacityAh: [100, 101, 99, 100.5], arrivalCharge: [0.6, 0.62, 0.59, 0.61] });

  /** A bank of identical modules, each with 1 mOhm of lead below it. */
  function bank(wiring: Candidate['wiring'], strings: number, positions: number): ReferenceBank {
    const modules = Array.from({ length: strings }, (_, s) =>
      Array.from({ length: positions }, (_, p) => module(`m${s}-${p}`)),
    );
    return bankOf('identical', {
      modules,
      wiring,
      leads: modules.map(() => ({ negativeOhm: 0.001, betweenOhm: 0.001, positiveOhm: 0 })),
      cycles: repeated(referenceDuty(strings * positions), 3),
    });
  }

  it('behave as one, in strings and cross-linked, from 1S1P to 4S4P', () => {
    const [[...one]] = chargeOfStrings(bank('strings', 1, 1));
    for (const wiring of ['strings', 'cross-linked'] as const) {
      for (const [strings, positions] of [
        [1, 4],
        [4, 1],
        [2, 2],
        [4, 4],
      ]) {
        for (const string of chargeOfStrings(bank(wiring, strings, positions))) {
          string.forEach((z, c) => {
            expect(Math.abs(z - one[c % 4])).toBeLessThan(2e-5);
          });
        }
      }
    }
  });

  it('stay identical to the last digit but rounding, so that drift is 0', () => {
    for (const wiring of ['strings', 'cross-linked'] as const) {
      const strings = chargeOfStrings(bank(wiring, 3, 3));
      for (let c = 0; c < 4; c++) {
        const same = strings.flatMap((string) => string.filter((_, k) => k % 4 === c));
        expect(Math.max(...same) - Math.min(...same)).toBeLessThan(1e-9);
      }
    }
  });
});
