import { normalCdf, normalQuantile } from '../mathematics/inverse-cdf.js';
import type { Law } from '../study/study.js';

/** Standard deviations at which laws without ends of their own are cut. */
const CUT_SD = 5;

/** A deviation ready to be drawn, in the unit of its law. */
export interface Deviation {
  readonly mean: number;
  /** False if every draw is the mean. */
  readonly spreads: boolean;
  /** The value below which the share u of all draws lies; non-decreasing on 0 to 1, both ends included. */
  readonly quantile: (u: number) => number;
}

const NO_DEVIATION: Deviation = { mean: 0, spreads: false, quantile: () => 0 };

/**
 * Makes a law ready for drawing by its inverse distribution function. Nothing is clipped: a cut law is the law on
 * condition that the value lies between the cuts, renormalised, so no value gathers at an end.
 *
 * - `fixed`, and every law whose spread is 0: 0.
 * - `normal`: cut at -5 and +5 sd. Mean 0, standard deviation 0.9999926 sd.
 * - `truncated-normal`: a normal of standard deviation sd about 0 between `lower` and `upper`, or the cuts at 5 sd where
 *   these are nearer. With a, b the ends in sd, phi and Phi the normal density and distribution, and
 *   m = (phi(a) - phi(b)) / (Phi(b) - Phi(a)): mean sd m, which is 0 only for ends of equal distance; variance
 *   sd^2 (1 + (a phi(a) - b phi(b)) / (Phi(b) - Phi(a)) - m^2), smaller than sd^2.
 * - `lognormal`: scale (F - 1), F lognormal, its logarithm cut at -5 and +5 standard deviations s and shifted so that
 *   the mean of F is 1 with the cut: mean 0. s^2 = ln(1 + (sd / scale)^2); the cut takes 2e-5 off the standard
 *   deviation for sd / scale = 0.3, 4e-4 for 1.
 * - `uniform`: -halfWidth to +halfWidth. Mean 0, standard deviation halfWidth / sqrt(3).
 *
 * @param scale what F - 1 of a lognormal is multiplied by: 1 for a relative spread, else the nominal value
 * @throws RangeError if a lognormal has no positive scale, or a truncated normal leaves nothing between its ends
 */
export function deviationOf(law: Law, scale: number): Deviation {
  switch (law.law) {
    case 'fixed':
      return NO_DEVIATION;
    case 'normal':
      return law.sd === 0 ? NO_DEVIATION : cutNormal(law.sd, -CUT_SD, CUT_SD);
    case 'truncated-normal': {
      if (law.sd === 0) return NO_DEVIATION;
      return cutNormal(law.sd, Math.max(law.lower / law.sd, -CUT_SD), Math.min(law.upper / law.sd, CUT_SD));
    }
    case 'lognormal':
      return law.sd === 0 ? NO_DEVIATION : lognormal(law.sd, scale);
    case 'uniform': {
      const { halfWidth } = law;
      if (halfWidth === 0) return NO_DEVIATION;
      return { mean: 0, spreads: true, quantile: (u) => halfWidth * (2 * u - 1) };
    }
  }
}

/** Normal of standard deviation `sd` on condition that it lies between `from` and `to`, in sd. */
function cutNormal(sd: number, from: number, to: number): Deviation {
  const score = cutScore(from, to);
  // Ends of equal distance have mean 0 exactly, not to a rounding error.
  const mean = from === -to ? 0 : (sd * (normalDensity(from) - normalDensity(to))) / (normalCdf(to) - normalCdf(from));
  return { mean, spreads: true, quantile: (u) => sd * score(u) };
}

function lognormal(sd: number, scale: number): Deviation {
  if (!(scale > 0)) throw new RangeError(`a lognormal deviation needs a nominal value above 0, got ${scale}`);
  const ratio = sd / scale;
  const sigma = Math.sqrt(Math.log1p(ratio * ratio));
  // E exp(sigma Z) = exp(sigma^2 / 2) (Phi(5 - sigma) - Phi(-5 - sigma)) / (Phi(5) - Phi(-5)) for Z cut at -5 and +5.
  const kept = normalCdf(CUT_SD - sigma) - normalCdf(-CUT_SD - sigma);
  const shift = -(sigma * sigma) / 2 - Math.log(kept / (normalCdf(CUT_SD) - normalCdf(-CUT_SD)));
  const score = cutScore(-CUT_SD, CUT_SD);
  return { mean: 0, spreads: true, quantile: (u) => scale * Math.expm1(sigma * score(u) + shift) };
}

/** Quantile function of the standard normal between two cuts. */
function cutScore(from: number, to: number): (u: number) => number {
  const below = normalCdf(from);
  const within = normalCdf(to) - below;
  if (!(within > 1e-6)) {
    throw new RangeError(
      `a truncated normal must keep more than 1e-6 of the normal, got ${within} (${from} to ${to} sd)`,
    );
  }
  return (u) => normalQuantile(below + u * within);
}

function normalDensity(z: number): number {
  return Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI);
}
