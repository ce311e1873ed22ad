import type { Distribution } from './distribution.js';

/**
 * Triangular law from 0 to 1 with its peak at c.
 *
 *   F(x) = x^2 / c below c,  1 - (1 - x)^2 / (1 - c) above;   mean (1 + c) / 3,  variance (1 - c + c^2) / 18
 *
 * @param peak c, 0 to 1
 * @throws RangeError if it is not
 */
export function triangular(peak: number): Distribution {
  if (!(peak >= 0 && peak <= 1)) throw new RangeError(`the peak of a triangular law must be 0 to 1, got ${peak}`);
  return {
    mean: (1 + peak) / 3,
    sd: Math.sqrt((1 - peak + peak * peak) / 18),
    lower: 0,
    upper: 1,
    cdf: (x) => {
      if (x <= 0) return 0;
      if (x >= 1) return 1;
      return x < peak ? (x * x) / peak : 1 - ((1 - x) * (1 - x)) / (1 - peak);
    },
    quantile: (u) => (u < peak ? Math.sqrt(u * peak) : 1 - Math.sqrt((1 - u) * (1 - peak))),
  };
}
