import type { OcvTable } from './study.js';

/**
 * Open-circuit voltage of a LiFePO4/graphite cell from fits of both electrodes.
 *
 *   U(s) = U_LFP(y) - U_gr(x),   x = 0.0085 + s (0.78 - 0.0085),   y = 0.985 - 0.95 s
 *
 * The stoichiometry window of the graphite is the source's; that of the iron phosphate is our choice.
 *
 * @param s charge fraction, 0 to 1; the fit is trusted from 0.10 to 0.99
 * @returns volts
 * @see M. Safari, C. Delacourt, J. Electrochem. Soc. 158 (2011) A562
 */
export function publishedOcvV(s: number): number {
  return ironPhosphateV(0.985 - 0.95 * s) - graphiteV(0.0085 + s * (0.78 - 0.0085));
}

function graphiteV(x: number): number {
  return (
    0.6379 +
    0.5416 * Math.exp(-305.5309 * x) +
    0.044 * Math.tanh(-(x - 0.1958) / 0.1088) -
    0.1978 * Math.tanh((x - 1.0571) / 0.0854) -
    0.6875 * Math.tanh((x + 0.0117) / 0.0529) -
    0.0175 * Math.tanh((x - 0.5692) / 0.0875)
  );
}

function ironPhosphateV(y: number): number {
  const rest = 1 - y;
  return (
    3.4323 -
    0.8428 * Math.exp(-80.2493 * rest ** 1.3198) -
    3.2474e-6 * Math.exp(20.2645 * rest ** 3.8003) +
    3.2482e-6 * Math.exp(20.2646 * rest ** 3.7995)
  );
}

/** Ends of the default curve [own choice]: the fit's own ends depend on its voltage window. */
const BOTTOM = [
  [0, 2.5],
  [0.005, 2.65],
  [0.01, 2.75],
  [0.02, 2.87],
  [0.03, 2.95],
  [0.05, 3.05],
] as const;
const TOP = [
  [0.995, 3.46],
  [1, 3.65],
] as const;

/** Samples of the published curve per unit of charge: every half percent. */
const SAMPLES_PER_UNIT = 200;

/** @returns the table of a study that gives none: 0 is 2.50 V, 1 is 3.65 V, both after long rest */
export function defaultOcvTable(): OcvTable {
  const points: (readonly [number, number])[] = [...BOTTOM];
  for (let sample = 0.1 * SAMPLES_PER_UNIT; sample <= 0.99 * SAMPLES_PER_UNIT; sample++) {
    const s = sample / SAMPLES_PER_UNIT;
    // To the microvolt: the last digits of Math.exp and Math.tanh may differ between machines.
    points.push([s, Math.round(publishedOcvV(s) * 1e6) / 1e6]);
  }
  points.push(...TOP);
  return {
    interpolation: 'monotone',
    chargeFraction: points.map(([s]) => s),
    voltageV: points.map(([, v]) => v),
    slopeBelowV: 30,
    slopeAboveV: 40,
  };
}
