import { describe, expect, it } from 'vitest';
import { referenceBanks } from '../reference/banks.js';
import { chargeDifference } from '../reference/contract.js';
import { referenceDuty, repeated } from '../reference/duties.js';
import { optionBanks } from '../reference/option-banks.js';
import { simulateSlowBank, TRUSTED_STEPS } from '../reference/slow-bank.js';
import { runEngine } from './engine-run.js';

/** Two years of days, and the charge that the engine promises to keep to over any time. */
const CYCLES = Number(process.env.CYCLES ?? 730);
const PROMISED = 2e-4;
/**
 * Share of cycles that may end further off: a cell that only just touches its bleed threshold bleeds an hour earlier in one
 * of the two, at any tolerance, which is made up for within days.
 */
const BY_A_HAIR = 0.01;
const BANKS = ['2s2p-strings', '2s2p-cross-linked', '2p-native', 'equalised'];

describe(`the engine against the slow rewrite over ${CYCLES} cycles`, () => {
  it.each(BANKS)('%s', (name) => {
    const found = [...referenceBanks(), ...optionBanks()].find((bank) => bank.name === name);
    if (found === undefined) throw new Error(`no bank ${name}`);
    const bank = { ...found, cycles: repeated(referenceDuty(4), CYCLES) };
    const slow = simulateSlowBank(bank, { ...TRUSTED_STEPS, nodeLeakS: 0 });
    const fast = runEngine(bank);
    const charge = chargeDifference(fast.cycleEndCharge, slow.cycleEndCharge);
    const quarter = (q: number): number => Math.max(...charge.slice((q * CYCLES) / 4, ((q + 1) * CYCLES) / 4));
    const quarters = [0, 1, 2, 3].map((q) => quarter(q).toExponential(1)).join(' ');
    process.stdout.write(
      `${name}: largest difference of charge by quarter of the course ${quarters}; ${slow.events.length} events, here ${fast.events.length}\n`,
    );
    expect(charge.filter((difference) => !(difference < PROMISED)).length).toBeLessThan(BY_A_HAIR * CYCLES);
    expect(quarter(3)).toBeLessThan(PROMISED);
  });
});
