import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ocvV } from '../../src/bank/ocv-curves.js';
import { hysteresisAfter, updateEmf } from '../../src/simulation/chain-emf.js';
import { bankOf } from '../reference/bank-of.js';
import { bareModule, straightTable } from '../reference/bare-module.js';
import { journeyOf } from './journey-of.js';

describe('updateEmf', () => {
  it.each([
    ['alike', [60, 61]],
    ['unlike', [60, 7]],
  ] as const)('has the voltage of each cell as its own laws give it, with rates of hysteresis %s', (_, rates) => {
    const modules = rates.map((hysteresisRate, k) =>
      bareModule(`m${k}`, { arrivalCharge: [0.5 + 0.1 * k], hysteresisV: 0.0075, hysteresisRate, leakageA: [0.3] }),
    );
    const { kernel } = journeyOf(bankOf('two', { modules: [modules], cycles: [], ocvTables: [straightTable(3, 1)] }));
    const { bank, state, point, chargePerAs, chargePerS, offsetA } = kernel;
    const random = fc.record({
      passedAs: fc.double({ min: -90_000, max: 90_000, noNaN: true }),
      elapsedS: fc.double({ min: 0, max: 3600, noNaN: true }),
      h: fc.double({ min: -1, max: 1, noNaN: true }),
      offset: fc.double({ min: 0, max: 0.1, noNaN: true }),
    });
    fc.assert(
      fc.property(random, ({ passedAs, elapsedS, h, offset }) => {
        state.hysteresis.set([h, -h]);
        offsetA.set([0.5 * offset, offset]);
        updateEmf(kernel, elapsedS, Float64Array.of(passedAs), new Float64Array(state.filterA.length));
        for (let c = 0; c < bank.cells; c++) {
          const z = state.charge[c] + chargePerAs[c] * passedAs + chargePerS[c] * elapsedS;
          const into = passedAs - offsetA[c] * elapsedS;
          const after = hysteresisAfter(state.hysteresis[c], into, bank.hysteresisPerAs[c]);
          const volts = ocvV(bank.ocv, bank.curveOfCell[c], z) + bank.hysteresisV[c] * after;
          expect(Math.abs(point.cellV[c] - volts)).toBeLessThan(1e-7);
        }
      }),
      { seed: 11, numRuns: 300 },
    );
  });
});
