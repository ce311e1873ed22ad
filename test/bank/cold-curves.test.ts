import { describe, expect, it } from 'vitest';
import { coldCurves } from '../../src/bank/cold-curves.js';
import { compileOcvCurves, findPiece, ocvV } from '../../src/bank/ocv-curves.js';
import { straightTable } from '../reference/bare-module.js';
import { DEFAULT_TABLE } from '../reference/default-table.js';

describe('coldCurves', () => {
  const curves = compileOcvCurves([straightTable(3, 1), DEFAULT_TABLE]);
  const cold = coldCurves(curves, [
    { curve: 1, floor: 0.12 },
    { curve: 0, floor: 0.05 },
    { curve: 1, floor: 0 },
  ]);

  it('draw every piece of a curve together above its floor', () => {
    // From the definition: U_T(z) = U((z - floor) / (1 - floor)), within and beyond both ends.
    for (let z = -0.1; z <= 1.1; z += 0.0037) {
      expect(ocvV(cold, 0, z)).toBeCloseTo(ocvV(curves, 1, (z - 0.12) / 0.88), 10);
      expect(ocvV(cold, 1, z)).toBeCloseTo(ocvV(curves, 0, (z - 0.05) / 0.95), 10);
      expect(ocvV(cold, 2, z)).toBeCloseTo(ocvV(curves, 1, z), 10);
    }
  });

  it('are looked up in the piece that they name', () => {
    for (let z = -0.1; z <= 1.1; z += 0.0037) {
      const piece = findPiece(cold, 0, z);
      expect(z < cold.knots[piece + 1] && (z >= cold.knots[piece] || piece === 0)).toBe(true);
    }
  });
});
