import { describe, expect, it } from 'vitest';
import { BLEED_ABOVE_LOWEST, BLEED_EACH, buildBank } from '../../src/bank/bank.js';
import { copyBankState, createBankState } from '../../src/bank/bank-state.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { placeModule, rehouse } from '../../src/bank/placed-module.js';
import type { Candidate, ModuleParameters } from '../../src/study/study.js';
import { type BankSketch, bankOf } from '../reference/bank-of.js';
import { bareModule } from '../reference/bare-module.js';
import { DEFAULT_TABLE } from '../reference/default-table.js';
import { plainModule } from '../reference/plain-module.js';

function build(modules: ModuleParameters[][], sketch: Partial<Candidate> = {}) {
  const { candidate } = bankOf('bank', { modules, cycles: [], ...sketch } as BankSketch);
  const named = new Map(modules.flat().map((module) => [module.id, module]));
  return buildBank(candidate, named, compileOcvCurves([DEFAULT_TABLE]));
}

describe('buildBank', () => {
  it('numbers modules string by string and cells module by module', () => {
    const bank = build([
      [plainModule('a', { capacityAh: [1, 2] }), plainModule('b', { capacityAh: [3] })],
      [plainModule('c', { capacityAh: [4, 5] }), plainModule('d', { capacityAh: [6] })],
    ]);
    expect([...bank.capacityAs].map((as) => as / 3600)).toEqual([1, 2, 3, 4, 5, 6]);
    expect([...bank.moduleOfCell]).toEqual([0, 0, 1, 2, 2, 3]);
    expect([...bank.cellStart]).toEqual([0, 2, 3, 5, 6]);
    expect([...bank.chainOfModule]).toEqual([0, 0, 1, 1]);
  });

  it('sums along a chain: ohms with leads and paths, polarisation pair by pair, smallest capacity', () => {
    const unlike = bareModule('b', {
      capacityAh: [80, 90],
      resistanceOhm: [0.001, 0.002],
      leakageA: [0, 0],
      efficiency: [1, 1],
      arrivalCharge: [0.5, 0.5],
      polarisation: [{ timeConstantS: 300, resistanceOhm: [0.003, 0.004] }],
      pathResistanceOhm: 0.02,
    });
    const plain = plainModule('a', { resistanceOhm: [0.0008, 0.0008] });
    const leads = [{ negativeOhm: 0.1, betweenOhm: 0.2, positiveOhm: 0.3 }];
    const bank = build([[plain, unlike]], { leads });
    // By hand: 2 x 0.8 + 2.8 mOhm, 3 + 20 mOhm, 0.6 Ohm of leads.
    expect(bank.chainOhm[0]).toBeCloseTo(0.0016 + 0.0028 + 0.003 + 0.02 + 0.6, 12);
    expect([...bank.timeConstantS]).toEqual([60, 1800, 300]);
    [0.0008, 0.0012, 0.007].forEach((ohm, k) => {
      expect(bank.chainPolarisationOhm[k]).toBeCloseTo(ohm, 12);
    });
    expect(bank.chainCapacityAs[0]).toBe(80 * 3600);
  });

  it('rates a bank by the smallest module of each string, and drift by the largest of all', () => {
    const rated = (id: string, ratedAh: number) => bareModule(id, { ratedAh });
    const bank = build([
      [rated('a', 100), rated('b', 80)],
      [rated('c', 110), rated('d', 120)],
    ]);
    expect(bank.ratedAh).toBe(190);
    expect(bank.driftRatedAh).toBe(120);
  });

  it('replaces the bleed of the modules key by key', () => {
    const module = plainModule('a', { rest: { bleedStartV: 3.4 } });
    const own = build([[module]]);
    expect([own.bleedRule[0], own.bleedStopV[0]]).toEqual([BLEED_ABOVE_LOWEST, 3.4 - 0.02]);
    const bank = build([[module]], { bleed: { rule: 'each', currentA: 0.2, startV: 3.5 } });
    expect(bank.bleedRule[0]).toBe(BLEED_EACH);
    expect([bank.bleedA[0], bank.bleedStartV[0], bank.bleedDeltaV[0]]).toEqual([0.2, 3.5, 0.01]);
    expect(bank.bleedStopV[0]).toBeCloseTo(3.48, 12);
  });

  it('names a module that no stock has', () => {
    const { candidate } = bankOf('bank', { modules: [[plainModule('a')]], cycles: [] });
    expect(() => buildBank(candidate, new Map(), compileOcvCurves([DEFAULT_TABLE]))).toThrow(
      'module a must be in a stock',
    );
  });
});

describe('rehouse', () => {
  it('keeps every cell and takes BMS and path of position 1', () => {
    const lower = plainModule('lower', { capacityAh: [90, 91], rest: { overVoltageV: 3.6, standbyA: 0.02 } });
    const upper = plainModule('upper', { capacityAh: [95, 96], rest: { ratedAh: 95, pathResistanceOhm: 1 } });
    const pack = rehouse([lower, upper].map(placeModule));
    expect(pack.cells.map(({ capacityAh }) => capacityAh)).toEqual([90, 91, 95, 96]);
    expect(pack.parameters).toMatchObject({
      id: 'lower+upper',
      ratedAh: 95,
      overVoltageV: 3.6,
      standbyA: 0.02,
      pathResistanceOhm: 0.0028,
    });
  });

  it('leaves a module alone that is a string by itself', () => {
    const module = placeModule(plainModule('a'));
    expect(rehouse([module])).toBe(module);
  });

  it('makes one chain of leads at both ends only', () => {
    const bank = build([[plainModule('a'), plainModule('b')]], {
      wiring: 'native',
      leads: [{ negativeOhm: 0.1, betweenOhm: 100, positiveOhm: 0.3 }],
    });
    expect([bank.modules, bank.positions, bank.cells]).toEqual([1, 1, 8]);
    // 8 x 0.8 + 2.8 mOhm.
    expect(bank.chainOhm[0]).toBeCloseTo(0.4 + 0.0092, 12);
  });
});

describe('a bank state', () => {
  it('begins as received, rested and closed', () => {
    const state = createBankState(build([[plainModule('a', { arrivalCharge: [0.4, 0.5] })]]));
    expect([...state.charge]).toEqual([0.4, 0.5]);
    for (const zero of [state.hysteresis, state.filterA, state.bleeding, state.overVoltage, state.chainMode]) {
      expect(zero.every((value) => value === 0)).toBe(true);
    }
  });

  it('is copied in full', () => {
    const bank = build([[plainModule('a')]]);
    const state = createBankState(bank);
    for (const part of Object.values(state)) {
      if (Array.isArray(part)) for (const trips of part) trips.push(7, 8);
      else part.fill(1);
    }
    const copy = copyBankState(bank, state);
    expect(copy).toEqual(state);
    copy.charge[0] = 0.1;
    copy.recentTripsS[0].push(5);
    expect(state.charge[0]).toBe(1);
    expect(state.recentTripsS[0]).toEqual([7, 8]);
  });
});
