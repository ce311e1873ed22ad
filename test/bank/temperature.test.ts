import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { buildBank } from '../../src/bank/bank.js';
import { coldCurves } from '../../src/bank/cold-curves.js';
import { compileOcvCurves, ocvV } from '../../src/bank/ocv-curves.js';
import { arrheniusFactor, chargeFloor, REFERENCE_K } from '../../src/bank/temperature.js';
import { warmedBank } from '../../src/bank/warmed-bank.js';
import { bankOf } from '../reference/bank-of.js';
import { straightTable } from '../reference/bare-module.js';
import { DEFAULT_TABLE } from '../reference/default-table.js';
import { plainModule } from '../reference/plain-module.js';

const kelvin = (celsius: number): number => celsius + 273.15;

describe("Arrhenius' law", () => {
  // By hand: exp(20000 / 8.314 (1 / T - 1 / 298.15)) for resistances.
  it.each([
    [-10, 2.9245],
    [0, 2.0927],
    [10, 1.5333],
    [25, 1],
    [40, 0.6794],
  ])('at 20 kJ/mol gives a resistance at %d degC %d times that at 25 degC', (celsius, factor) => {
    expect(arrheniusFactor(-20_000, kelvin(celsius))).toBeCloseTo(factor, 4);
  });

  it('at 39 kJ/mol gives a leakage 1.67 times as large for 10 K more about 25 degC', () => {
    // By hand: exp(39000 / 8.314 (1 / 298.15 - 1 / 308.15)) = 1.666.
    expect(arrheniusFactor(39_000, kelvin(35))).toBeCloseTo(1.67, 2);
  });
});

describe('the charge out of reach', () => {
  it.each([
    [60, 0],
    [25, 0],
    [12.5, 0.025],
    [0, 0.05],
    [-5, 0.085],
    [-10, 0.12],
    [-20, 0.19],
    [-100, 0.5],
  ])('at %d degC is %d (own choice, straight between and beyond, by hand)', (celsius, floor) => {
    expect(chargeFloor(kelvin(celsius))).toBeCloseTo(floor, 12);
  });
});

describe('the curves of a cold bank', () => {
  const tables = [DEFAULT_TABLE, straightTable(3, 1), { ...DEFAULT_TABLE, interpolation: 'linear' as const }];
  const curves = compileOcvCurves(tables);

  it('are those of (z - floor) / (1 - floor), within the table and beyond', () => {
    const cold = [
      { curve: 2, floor: 0.12 },
      { curve: 0, floor: 0.05 },
      { curve: 1, floor: 0.5 },
      { curve: 0, floor: 0 },
    ];
    const drawn = coldCurves(curves, cold);
    fc.assert(
      fc.property(fc.nat(cold.length - 1), fc.double({ min: -0.2, max: 1.2, noNaN: true }), (k, z) => {
        const { curve, floor } = cold[k] ?? { curve: 0, floor: 0 };
        expect(ocvV(drawn, k, z)).toBeCloseTo(ocvV(curves, curve, (z - floor) / (1 - floor)), 9);
      }),
      { seed: 5, numRuns: 2000 },
    );
  });
});

describe('a bank at a temperature', () => {
  const activation = { resistanceJPerMol: 20_000, leakageJPerMol: 39_000 };
  const { candidate, modules, ocvTables } = bankOf('house', {
    modules: [
      [plainModule('a', { rest: { activation } }), plainModule('b', { rest: { activation } })],
      [plainModule('c', { rest: { activation } }), plainModule('d')],
    ],
    cycles: [],
    slotOffsetK: [
      [0, 3],
      [0, 0],
    ],
  });
  const named = new Map(modules.flat().map((module) => [module.id, module]));
  const bank = buildBank(candidate, named, compileOcvCurves(ocvTables));
  const at = (celsius: number) =>
    warmedBank(
      bank,
      bank.temperature.offsetK.map((offsetK) => kelvin(celsius) + offsetK),
    );

  it('is the same bank where every module has 25 degC', () => {
    expect(warmedBank(bank, new Float64Array(4).fill(REFERENCE_K))).toBe(bank);
    expect(25 + 273.15).toBe(REFERENCE_K);
  });

  it('has cell resistances, polarisation and leakage by the law of each cell at the temperature of its module', () => {
    const cold = at(-10);
    // By hand: 2.9245 at -10 degC, and exp(20000 / 8.314 (1 / 266.15 - 1 / 298.15)) = 2.6382 in the slot 3 K warmer.
    const factors = [2.9245, 2.6382, 2.9245, 1];
    factors.forEach((factor, m) => {
      const c = 4 * m;
      expect(cold.resistanceOhm[c] / 0.0008).toBeCloseTo(factor, 4);
      expect(cold.polarisationOhm[c] / 0.0004).toBeCloseTo(factor, 4);
      expect(cold.polarisationOhm[bank.cells + c] / 0.0006).toBeCloseTo(factor, 4);
    });
    expect(at(35).leakageA[0] / 0.0004).toBeCloseTo(1.67, 2);
    expect(at(35).leakageA[15]).toBe(0.0004);
  });

  it('keeps BMS paths and leads, so a chain grows by what its cells do', () => {
    const cold = at(-10);
    // By hand, mOhm: four cells of 0.8 in each module.
    const grown = (first: number, second: number): number => 4 * 0.0008 * (first - 1 + second - 1);
    expect(cold.chainOhm[0] - bank.chainOhm[0]).toBeCloseTo(grown(2.9245, 2.6382), 6);
    expect(cold.chainOhm[1] - bank.chainOhm[1]).toBeCloseTo(grown(2.9245, 1), 6);
    expect(cold.pathOhm).toBe(bank.pathOhm);
  });

  it('knows a module of its own offset by the sum with its slot', () => {
    const warm = new Map(named).set('b', plainModule('b', { rest: { temperatureOffsetK: 1.5 } }));
    expect([...buildBank(candidate, warm, bank.ocv).temperature.offsetK]).toEqual([0, 4.5, 0, 0]);
  });
});
