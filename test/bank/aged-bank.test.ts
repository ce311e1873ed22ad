import { describe, expect, it } from 'vitest';
import { agedBank } from '../../src/bank/aged-bank.js';
import { buildBank } from '../../src/bank/bank.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { bankOf } from '../reference/bank-of.js';
import { DEFAULT_TABLE } from '../reference/default-table.js';
import { plainModule } from '../reference/plain-module.js';

const AGEING = { law: 'naumann', initialFadeFraction: 0, resistanceGrowth: 5, rate: 1 } as const;

describe('an aged bank', () => {
  const module = plainModule('a', { rest: { ageing: AGEING } });
  const { candidate } = bankOf('bank', { modules: [[module]], cycles: [] });
  const bank = buildBank(candidate, new Map([['a', module]]), compileOcvCurves([DEFAULT_TABLE]));
  const left = new Float64Array(bank.cells).fill(0.9);
  left[1] = 0.8;
  const aged = agedBank(bank, left);

  it('has what is left of its capacity', () => {
    expect(aged.capacityAs[0] / bank.capacityAs[0]).toBeCloseTo(0.9, 12);
    expect(aged.chainCapacityAs[0]).toBeCloseTo(0.8 * bank.capacityAs[1], 6);
    expect(aged.hysteresisPerAs[0] * aged.capacityAs[0]).toBeCloseTo(bank.hysteresisPerAs[0] * bank.capacityAs[0], 12);
  });

  it('resists the more, at its cells only', () => {
    // By hand: 5 x 0.1 and 5 x 0.2 of the cells' own; leads and path as they were.
    expect(aged.resistanceOhm[0] / bank.resistanceOhm[0]).toBeCloseTo(1.5, 12);
    expect(aged.resistanceOhm[1] / bank.resistanceOhm[1]).toBeCloseTo(2, 12);
    bank.polarisationOhm.forEach((ohm, at) => {
      expect(aged.polarisationOhm[at]).toBeCloseTo(ohm * (at % bank.cells === 1 ? 2 : 1.5), 12);
    });
    const [first, second, ...others] = bank.resistanceOhm;
    const more = 0.5 * (first + others.reduce((sum, ohm) => sum + ohm, 0)) + second;
    expect(aged.chainOhm[0] - bank.chainOhm[0]).toBeCloseTo(more, 12);
    expect(aged.pathOhm).toBe(bank.pathOhm);
  });

  it('leaves the bank it is made from as it was', () => {
    expect(bank.capacityAs[0]).toBe(3600 * module.capacityAh[0]);
  });
});
