import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compileOcvCurves, ocvV } from '../../src/bank/ocv-curves.js';
import type { OcvTable } from '../../src/study/study.js';
import { straightTable } from '../reference/bare-module.js';
import { DEFAULT_TABLE } from '../reference/default-table.js';
import { ocvCurve } from '../reference/ocv-curve.js';

const table = (interpolation: OcvTable['interpolation'], chargeFraction: number[], voltageV: number[]): OcvTable => ({
  interpolation,
  chargeFraction,
  voltageV,
  slopeBelowV: null,
  slopeAboveV: null,
});

describe('open-circuit voltage', () => {
  it('follows the independent curve of the tests within the table and beyond', () => {
    // Several tables laid end to end; the second has twenty points within a thousandth of its width.
    const fine = Array.from({ length: 20 }, (_, i) => 0.5 + i * 2e-5);
    const tables = [
      DEFAULT_TABLE,
      table('monotone', [0, ...fine, 1], [2.5, ...fine.map((z, i) => 3 + z / 100 + i * i * 1e-4), 3.6]),
      table('linear', [0, 0.1, 0.4, 1], [2.5, 3.2, 3.3, 3.65]),
      straightTable(12, 0.4),
    ];
    const curves = compileOcvCurves(tables);
    const independent = tables.map(ocvCurve);
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: tables.length - 1 }),
        fc.oneof(
          fc.double({ min: -0.3, max: 1.3, noNaN: true }),
          fc.double({ min: 0.4999, max: 0.5005, noNaN: true }),
          fc.constantFrom(0, 1, -1e300, 1e300),
        ),
        (k, z) => {
          const expected = independent[k](z);
          expect(Math.abs(ocvV(curves, k, z) - expected)).toBeLessThan(1e-12 * Math.max(1, Math.abs(expected)));
        },
      ),
      { seed: 71, numRuns: 2000 },
    );
  });

  it('is exact at every point of a table', () => {
    const curves = compileOcvCurves([DEFAULT_TABLE]);
    DEFAULT_TABLE.chargeFraction.forEach((z, i) => {
      expect(ocvV(curves, 0, z)).toBeCloseTo(DEFAULT_TABLE.voltageV[i], 14);
    });
  });
});
