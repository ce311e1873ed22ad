import { describe, expect, it } from 'vitest';
import { compileOcvCurves, ocvV } from '../../src/bank/ocv-curves.js';
import { ocvIntegralV } from '../../src/bank/stored-energy.js';
import { straightTable } from '../reference/bare-module.js';
import { DEFAULT_TABLE } from '../reference/default-table.js';

describe('the integral of an open-circuit curve', () => {
  it('is that of a straight line, to either side and beyond its ends', () => {
    const line = compileOcvCurves([straightTable(3, 1)]);
    // By hand: 3 z + z^2 / 2.
    expect(ocvIntegralV(line, 0, 0.2, 0.6)).toBeCloseTo(1.2 + 0.16, 14);
    expect(ocvIntegralV(line, 0, 0.6, 0.2)).toBeCloseTo(-1.36, 14);
    expect(ocvIntegralV(line, 0, -0.5, 1.5)).toBeCloseTo(6 + 1, 14);
  });

  it('agrees with a sum of many small steps along the default curve', () => {
    const curves = compileOcvCurves([DEFAULT_TABLE]);
    const [from, to, parts] = [-0.03, 1.02, 200_000];
    let sum = 0;
    for (let k = 0; k < parts; k++) sum += ocvV(curves, 0, from + ((k + 0.5) / parts) * (to - from));
    expect(ocvIntegralV(curves, 0, from, to)).toBeCloseTo((sum / parts) * (to - from), 8);
  });
});
