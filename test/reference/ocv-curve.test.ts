import { describe, expect, it } from 'vitest';
import { DEFAULT_TABLE, publishedOcvV } from './default-table.js';
import { ocvCurve } from './ocv-curve.js';

const table = (chargeFraction: number[], voltageV: number[], interpolation: 'monotone' | 'linear' = 'monotone') => ({
  interpolation,
  chargeFraction,
  voltageV,
  slopeBelowV: null,
  slopeAboveV: null,
});

describe('the open-circuit voltage curve of the slow rewrite', () => {
  it('takes the slopes worked out by hand for three points', () => {
    // Widths 1, 2, secants 1, 1/2: inside 9 / (5/1 + 4/0.5) = 9/13; ends (4 x 1 - 1 x 0.5)/3 = 7/6 and
    // (5 x 0.5 - 2 x 1)/3 = 1/6. At 0.5: 1/2 + (7/6 - 9/13)/8. At 2: (1 + 2)/2 + 2 (9/13 - 1/6)/8.
    const curve = ocvCurve(table([0, 1, 3], [0, 1, 2]));
    expect(curve(0.5)).toBeCloseTo(0.5 + (7 / 6 - 9 / 13) / 8, 14);
    expect(curve(2)).toBeCloseTo(1.5 + (9 / 13 - 1 / 6) / 4, 14);
    expect(curve(-1)).toBeCloseTo(-7 / 6, 14);
    expect(curve(4)).toBeCloseTo(2 + 1 / 6, 14);
  });

  it('agrees with a general-purpose library, limited end slopes included', () => {
    // SciPy 1.17.1, interpolate.PchipInterpolator.
    const steep = ocvCurve(table([0, 1, 2, 3], [0, 0.1, 2, 2.05]));
    const expected = [0.00671875, 0.02625, 1.061570512820513, 2.037179487179487, 2.0494769230769228];
    [0.25, 0.5, 1.5, 2.5, 2.9].forEach((z, i) => {
      expect(steep(z)).toBeCloseTo(expected[i], 13);
    });
    const lower = ocvCurve(
      table([0, 0.005, 0.01, 0.02, 0.03, 0.05, 0.1, 0.2], [2.5, 2.65, 2.75, 2.87, 2.95, 3.05, 3.1883, 3.2517]),
    );
    const lowerExpected = [
      2.581875, 2.705357142857143, 2.8172857142857146, 3.0065036771832894, 3.1201024077908546, 3.233860120134888,
    ];
    [0.0025, 0.0075, 0.015, 0.04, 0.07, 0.15].forEach((z, i) => {
      expect(lower(z)).toBeCloseTo(lowerExpected[i], 13);
    });
  });

  it('joins points by straight lines and continues the outermost ones when asked to', () => {
    const curve = ocvCurve(table([0, 0.5, 1], [3, 3.2, 3.3], 'linear'));
    // By hand: slopes 0.4 and 0.2.
    expect(curve(0.25)).toBeCloseTo(3.1, 14);
    expect(curve(0.75)).toBeCloseTo(3.25, 14);
    expect(curve(-0.1)).toBeCloseTo(2.96, 14);
    expect(curve(1.1)).toBeCloseTo(3.32, 14);
  });

  it('continues with the slopes of the table where it has them', () => {
    const curve = ocvCurve(DEFAULT_TABLE);
    expect(curve(1.01)).toBeCloseTo(3.65 + 0.4, 12);
    expect(curve(-0.01)).toBeCloseTo(2.5 - 0.3, 12);
  });

  it('never falls between the points of the default table', () => {
    const curve = ocvCurve(DEFAULT_TABLE);
    let previous = curve(-0.02);
    for (let z = -0.0195; z <= 1.02; z += 0.0005) {
      expect(curve(z)).toBeGreaterThan(previous);
      previous = curve(z);
    }
  });
});

describe('the published LFP curve', () => {
  it('has the values of Safari and Delacourt with the chosen window', () => {
    // Evaluated from the formula of J. Electrochem. Soc. 158 (2011) A562 by a second route, to 0.1 mV.
    const values = [
      [0.05, 2.9868],
      [0.1, 3.1883],
      [0.3, 3.2835],
      [0.5, 3.309],
      [0.7, 3.3239],
      [0.9, 3.3449],
      [0.98, 3.3916],
      [1, 3.4782],
    ];
    for (const [s, v] of values) expect(Math.abs(publishedOcvV(s) - v)).toBeLessThan(6e-5);
  });
});
