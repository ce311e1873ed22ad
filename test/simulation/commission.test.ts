import { describe, expect, it } from 'vitest';
import { buildBank } from '../../src/bank/bank.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { commissionBank } from '../../src/simulation/commission.js';
import type { Candidate, ModuleParameters } from '../../src/study/study.js';
import { type BankSketch, bankOf } from '../reference/bank-of.js';
import { bareModule, straightTable } from '../reference/bare-module.js';
import { BENCH } from './one-cell.js';

/** U = 3 + z, 10 mOhm; charger of 4 V per module, tail hold 60 s. */
function commissioned(modules: ModuleParameters[], sketch: Partial<Candidate> = {}): number[] {
  const charger = { ...BENCH, absorptionV: 4 * modules.length };
  const { candidate } = bankOf('bank', {
    modules: [modules],
    cycles: [],
    charger,
    commissioning: 'each-module-full',
    ...sketch,
  } as BankSketch);
  const named = new Map(modules.map((module) => [module.id, module]));
  const ocv = compileOcvCurves([straightTable(3, 1)]);
  return [...commissionBank(buildBank(candidate, named, ocv), candidate, named, ocv).charge];
}

describe('commissioning', () => {
  // By hand: C/5 to 4 V, then the current falls with tau = 11 mOhm (1 mOhm of bench leads) x 3600 Q / 1 V and charge ends
  // 60 s after it has reached C/50: 1 - z = 0.011 x Q/50 x exp(-60 / tau).
  const shortOf = (capacityAh: number): number => 0.011 * (capacityAh / 50) * Math.exp(-60 / (39.6 * capacityAh));

  it('brings each module to full by itself, at its own rate', () => {
    const modules = [
      bareModule('a', { arrivalCharge: [0.3] }),
      bareModule('b', { arrivalCharge: [0.9], capacityAh: [50], ratedAh: 50 }),
    ];
    const [a, b] = commissioned(modules);
    expect(a).toBeCloseTo(1 - shortOf(100), 4);
    expect(b).toBeCloseTo(1 - shortOf(50), 4);
  });

  it('does so for native packs too, module by module', () => {
    const [a, b] = commissioned([bareModule('a'), bareModule('b', { arrivalCharge: [0.7] })], { wiring: 'native' });
    expect(a).toBeCloseTo(1 - shortOf(100), 4);
    expect(b).toBeCloseTo(1 - shortOf(100), 4);
  });

  it('stops where the BMS of the module stops it', () => {
    // At 3.9 V the bench holds 4 V over 11 mOhm, 9.1 A; 2 s of delay.
    const [z] = commissioned([bareModule('a', { overVoltageV: 3.9, overVoltageReleaseV: 3.5 })]);
    expect(z).toBeCloseTo(0.9 + (2 * 0.1) / 0.011 / 360_000, 6);
  });

  it('takes 48 h at most', () => {
    // 1 A from 0.1 for 48 h.
    const slow = bareModule('a', { ratedAh: 5, arrivalCharge: [0.1] });
    expect(commissioned([slow])[0]).toBeCloseTo(0.58, 5);
  });

  it('lets the module bleed meanwhile', () => {
    const bleed = { rule: 'each', when: 'always', stopBelowStartV: 0.02, deltaV: 0.01 } as const;
    const [z] = commissioned([bareModule('a', { bleedA: 3, bleedStartV: 3.5 }, { bleed })]);
    // 3 A of bleed, above the tail of 2 A, keep the bench busy for all 48 h, in the end for the bleed alone.
    expect(z).toBeCloseTo(1 - 0.011 * 3, 4);
  });

  it('is left out as received', () => {
    expect(commissioned([bareModule('a', { arrivalCharge: [0.37] })], { commissioning: 'as-received' })).toEqual([
      0.37,
    ]);
  });
});
