import type { OcvTable } from '../../src/study/study.js';

/**
 * The published LFP/graphite curve at 25 degC, V.
 *
 * @see M. Safari & C. Delacourt, J. Electrochem. Soc. 158 (2011) A562; the window of both electrodes is chosen here
 */
export function publishedOcvV(s: number): number {
  const x = 0.0085 + s * (0.78 - 0.0085);
  const y = 0.985 - 0.95 * s;
  const { exp, tanh } = Math;
  const graphite =
    0.6379 +
    0.5416 * exp(-305.5309 * x) +
    0.044 * tanh(-(x - 0.1958) / 0.1088) -
    0.1978 * tanh((x - 1.0571) / 0.0854) -
    0.6875 * tanh((x + 0.0117) / 0.0529) -
    0.0175 * tanh((x - 0.5692) / 0.0875);
  const phosphate =
    3.4323 -
    0.8428 * exp(-80.2493 * (1 - y) ** 1.3198) -
    3.2474e-6 * exp(20.2645 * (1 - y) ** 3.8003) +
    3.2482e-6 * exp(20.2646 * (1 - y) ** 3.7995);
  return phosphate - graphite;
}

const LOWER_END = [
  [0, 2.5],
  [0.005, 2.65],
  [0.01, 2.75],
  [0.02, 2.87],
  [0.03, 2.95],
  [0.05, 3.05],
];
const MIDDLE = Array.from({ length: 90 }, (_, i) => [(10 + i) / 100, publishedOcvV((10 + i) / 100)]);
const UPPER_END = [
  [0.995, 3.46],
  [1, 3.65],
];
const POINTS = [...LOWER_END, ...MIDDLE, ...UPPER_END];

/** The published curve from 0.10 to 0.99 with the ends of a typical cell, continued by 30 and 40 V per unit. */
export const DEFAULT_TABLE: OcvTable = {
  interpolation: 'monotone',
  chargeFraction: POINTS.map(([z]) => z),
  voltageV: POINTS.map(([, v]) => v),
  slopeBelowV: 30,
  slopeAboveV: 40,
};
