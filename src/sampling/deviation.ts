import { betaLaw } from '../mathematics/beta-law.js';
import type { Distribution } from '../mathematics/distribution.js';
import { normalCdf, normalQuantile } from '../mathematics/inverse-cdf.js';
import { triangular } from '../mathematics/triangular.js';
import { cutWeibull } from '../mathematics/weibull.js';
import type { Law } from '../study/study.js';
import { mixtureOf } from './mixture.js';
import { resampledFrom } from './resampled.js';

/** Standard deviations at which laws without ends of their own are cut. */
const CUT_SD = 5;

/** A deviation ready to be drawn, in the unit of its law. */
export interface Deviation {
  readonly mean: number;
  /** False if every draw is the mean. */
  readonly spreads: boolean;
  /** The value below which the share u of all draws lies; non-decreasing on 0 to 1, both ends included. */
  readonly quantile: (u: number) => number;
  /** Share of all draws at or below x; the inverse of `quantile` up to rounding. */
  readonly cdf: (x: number) => number;
}

const NO_DEVIATION: Deviation = { mean: 0, spreads: false, quantile: () => 0, cdf: (x) => (x >= 0 ? 1 : 0) };

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
 * - `triangular`: over a range of 2 halfWidth, its peak at the fraction c of it. Mean 0, which is not the middle of the
 *   range unless c is 1/2; standard deviation 2 halfWidth sqrt((1 - c + c^2) / 18).
 * - `weibull`: cut at 5 sd from the mean and moved so that the mean is 0 with the cut; `sd` is that of the uncut law. Of
 *   it the cut leaves 0.7134 for shape 0.5, 0.9541 for 1, 0.9995 for 2, all but 3e-8 for 3.6, 0.9872 for 100.
 * - `beta`: over a range of 2 halfWidth. Mean 0, standard deviation
 *   2 halfWidth sqrt(alpha beta / (alpha + beta + 1)) / (alpha + beta).
 * - `resampled`: the values written, each as likely as any other. Mean 0.
 * - `mixture`: factor times one of the parts by their weights, moved so that the mean is 0. Each part has its own cut.
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
      return {
        mean: 0,
        spreads: true,
        quantile: (u) => halfWidth * (2 * u - 1),
        cdf: (x) => Math.min(1, Math.max(0, (x / halfWidth + 1) / 2)),
      };
    }
    case 'triangular':
      return centred(triangular(law.peakFraction), 2 * law.halfWidth);
    case 'beta':
      return centred(betaLaw(law.alpha, law.beta), 2 * law.halfWidth);
    case 'weibull': {
      const weibull = cutWeibull(law.shape, CUT_SD);
      return centred(weibull, law.sd / weibull.uncutSd);
    }
    case 'resampled':
      return resampledFrom(law.values);
    case 'mixture':
      if (law.factor === 0) return NO_DEVIATION;
      return mixtureOf(
        law.parts.map(({ weight, at, law: own }) => ({ weight, at, deviation: deviationOf(own, scale) })),
        law.factor,
      );
  }
}

/** A distribution moved to mean 0, then `width` times as wide. */
function centred({ mean, quantile, cdf }: Distribution, width: number): Deviation {
  if (width === 0) return NO_DEVIATION;
  return {
    mean: 0,
    spreads: true,
    quantile: (u) => width * (quantile(u) - mean),
    cdf: (x) => cdf(mean + x / width),
  };
}

/** Normal of standard deviation `sd` on condition that it lies between `from` and `to`, in sd. */
function cutNormal(sd: number, from: number, to: number): Deviation {
  const score = cutScore(from, to);
  // Ends of equal distance have mean 0 exactly, not to a rounding error.
  const mean = from === -to ? 0 : (sd * (normalDensity(from) - normalDensity(to))) / (normalCdf(to) - normalCdf(from));
  const share = cutShare(from, to);
  return { mean, spreads: true, quantile: (u) => sd * score(u), cdf: (x) => share(x / sd) };
}

function lognormal(sd: number, scale: number): Deviation {
  if (!(scale > 0)) throw new RangeError(`a lognormal deviation needs a nominal value above 0, got ${scale}`);
  const ratio = sd / scale;
  const sigma = Math.sqrt(Math.log1p(ratio * ratio));
  // E exp(sigma Z) = exp(sigma^2 / 2) (Phi(5 - sigma) - Phi(-5 - sigma)) / (Phi(5) - Phi(-5)) for Z cut at -5 and +5.
  const kept = normalCdf(CUT_SD - sigma) - normalCdf(-CUT_SD - sigma);
  const shift = -(sigma * sigma) / 2 - Math.log(kept / (normalCdf(CUT_SD) - normalCdf(-CUT_SD)));
  const score = cutScore(-CUT_SD, CUT_SD);
  const share = cutShare(-CUT_SD, CUT_SD);
  return {
    mean: 0,
    spreads: true,
    quantile: (u) => scale * Math.expm1(sigma * score(u) + shift),
    cdf: (x) => (x <= -scale ? 0 : share((Math.log1p(x / scale) - shift) / sigma)),
  };
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

/** Distribution function of the standard normal between two cuts. */
function cutShare(from: number, to: number): (score: number) => number {
  const below = normalCdf(from);
  const within = normalCdf(to) - below;
  return (score) => {
    if (score <= from) return 0;
    return score >= to ? 1 : (normalCdf(score) - below) / within;
  };
}

function normalDensity(z: number): number {
  return Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI);
}
