import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { factorLu, solveLu } from '../../src/mathematics/small-lu.js';

describe('factorLu and solveLu', () => {
  it('solve a system worked by hand', () => {
    // 2 x + y = 5, 4 x + 5 y = 13: multiplier 2, pivots 2 and 3; y = 1, x = 2.
    const factors = Float64Array.of(2, 1, 4, 5);
    factorLu(factors, 2);
    expect([...factors]).toEqual([2, 1, 2, 3]);
    const x = Float64Array.of(5, 13);
    solveLu(factors, 2, x);
    expect([...x]).toEqual([2, 1]);
  });

  it('give back the solution of any 1 + S D with S semidefinite and D positive, up to 32 unknowns', () => {
    const value = fc.double({ min: -1, max: 1, noNaN: true });
    const system = fc.integer({ min: 1, max: 32 }).chain((n) =>
      fc.record({
        n: fc.constant(n),
        roots: fc.array(value, { minLength: n * n, maxLength: n * n }),
        scale: fc.array(fc.double({ min: 1e-3, max: 1e3, noNaN: true }), { minLength: n, maxLength: n }),
        solution: fc.array(value, { minLength: n, maxLength: n }),
      }),
    );
    fc.assert(
      fc.property(system, ({ n, roots, scale, solution }) => {
        const matrix = new Float64Array(n * n);
        const x = new Float64Array(n);
        for (let i = 0; i < n; i++) {
          for (let j = 0; j < n; j++) {
            let square = 0;
            for (let k = 0; k < n; k++) square += roots[i * n + k] * roots[j * n + k];
            matrix[i * n + j] = (i === j ? 1 : 0) + square * scale[j];
            x[i] += matrix[i * n + j] * solution[j];
          }
        }
        factorLu(matrix, n);
        solveLu(matrix, n, x);
        for (let i = 0; i < n; i++) expect(Math.abs(x[i] - solution[i])).toBeLessThan(1e-6);
      }),
      { seed: 7, numRuns: 200 },
    );
  });
});
