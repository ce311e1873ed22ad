import { describe, expect, it } from 'vitest';
import { defaultOcvTable, publishedOcvV } from '../../src/study/default-ocv.js';

// Safari & Delacourt, J. Electrochem. Soc. 158 (2011) A562, with y = 0.985 - 0.95 s: values worked out apart from this
// program from the published fits, to 0.1 mV.
const WORKED_OUT = [
  [0.05, 2.9868],
  [0.1, 3.1883],
  [0.2, 3.2517],
  [0.3, 3.2835],
  [0.4, 3.3022],
  [0.5, 3.309],
  [0.6, 3.3134],
  [0.7, 3.3239],
  [0.8, 3.3381],
  [0.9, 3.3449],
  [0.95, 3.3547],
  [0.98, 3.3916],
  [1, 3.4782],
] as const;

// Measured pseudo-OCV of a 1.2 Ah LFP cell at C/32: data set of Sunil, Pattipati, Balasingam, IEEE Trans. Instrum. Meas.
// 2025; linear between its breakpoints.
const MEASURED = [
  [0.0885, 3.1942],
  [0.2972, 3.2772],
  [0.9833, 3.3511],
] as const;

function measuredV(s: number): number {
  const above = MEASURED.findIndex(([charge]) => charge >= s);
  const [s0, v0] = MEASURED[above - 1] ?? MEASURED[0];
  const [s1, v1] = MEASURED[above] ?? MEASURED[2];
  return v0 + ((s - s0) / (s1 - s0)) * (v1 - v0);
}

describe('the published open-circuit curve', () => {
  it.each(WORKED_OUT)('at charge %f is %f V', (s, volts) => {
    expect(Math.abs(publishedOcvV(s) - volts)).toBeLessThan(0.6e-4);
  });

  it('lies within 20 mV of the measured set from 0.10 to 0.95', () => {
    for (let percent = 10; percent <= 95; percent++) {
      expect(Math.abs(publishedOcvV(percent / 100) - measuredV(percent / 100))).toBeLessThan(0.02);
    }
  });

  it('climbs by 0.102 V per unit of charge over 0.3 to 0.9 and 0.159 over 0.3 to 0.98', () => {
    expect((publishedOcvV(0.9) - publishedOcvV(0.3)) / 0.6).toBeCloseTo(0.102, 3);
    expect((publishedOcvV(0.98) - publishedOcvV(0.3)) / 0.68).toBeCloseTo(0.159, 3);
  });
});

describe('the default table', () => {
  const { chargeFraction, voltageV, slopeBelowV, slopeAboveV } = defaultOcvTable();
  const at = (s: number): number | undefined => voltageV[chargeFraction.indexOf(s)];

  it('is the published curve to the microvolt between its own ends', () => {
    for (const [index, s] of chargeFraction.entries()) {
      if (s >= 0.1 && s <= 0.99) expect(Math.abs((voltageV[index] ?? 0) - publishedOcvV(s))).toBeLessThan(0.6e-6);
    }
    expect(chargeFraction.filter((s) => s >= 0.1 && s <= 0.99)).toHaveLength(179);
  });

  // Own choice, documented.
  it('has the ends that the model pages state', () => {
    expect([0, 0.005, 0.01, 0.02, 0.03, 0.05, 0.995, 1].map(at)).toEqual([
      2.5, 2.65, 2.75, 2.87, 2.95, 3.05, 3.46, 3.65,
    ]);
    expect([slopeBelowV, slopeAboveV]).toEqual([30, 40]);
  });

  it('ascends strictly in both columns', () => {
    for (const values of [chargeFraction, voltageV]) {
      for (let index = 1; index < values.length; index++) {
        expect(values[index]).toBeGreaterThan(values[index - 1] ?? Number.POSITIVE_INFINITY);
      }
    }
  });
});
