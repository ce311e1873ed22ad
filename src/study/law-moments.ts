import { normalCdf } from '../mathematics/inverse-cdf.js';
import { cutWeibull } from '../mathematics/weibull.js';
import type { Law, MixtureLaw } from './study.js';

/** Unbounded laws are cut at so many standard deviations on either side. */
export const CUT_SDS = 5;

/**
 * Mean and standard deviation that a law has after its cut, in the unit of the law.
 *
 * Normal of standard deviation sd between a sd and b sd, phi and Phi the normal density and distribution:
 *
 *   m = (phi(a) - phi(b)) / (Phi(b) - Phi(a)),   mean sd m,
 *   variance sd^2 (1 + (a phi(a) - b phi(b)) / (Phi(b) - Phi(a)) - m^2)
 *
 * Lognormal F of mean 1 with its cut: E F^2 = exp(s^2) K(2 s) K(0) / K(s)^2, K(t) = Phi(5 - t) - Phi(-5 - t).
 * Mixture: the means of the parts are weighted, the variance is E X^2 less the square of the mean.
 *
 * @param nominal 1 if the law is relative, else the nominal value, above 0 for a lognormal law
 */
export function lawMoments(law: Law, nominal: number): { readonly mean: number; readonly sd: number } {
  switch (law.law) {
    case 'fixed':
      return { mean: 0, sd: 0 };
    case 'normal':
      return cutNormalMoments(law.sd, -CUT_SDS, CUT_SDS);
    case 'truncated-normal':
      if (law.sd === 0) return { mean: 0, sd: 0 };
      return cutNormalMoments(law.sd, Math.max(law.lower / law.sd, -CUT_SDS), Math.min(law.upper / law.sd, CUT_SDS));
    case 'lognormal': {
      const variance = Math.log1p((law.sd / nominal) ** 2);
      const kept = (t: number): number => normalCdf(CUT_SDS - t) - normalCdf(-CUT_SDS - t);
      const s = Math.sqrt(variance);
      return { mean: 0, sd: nominal * Math.sqrt((Math.exp(variance) * kept(2 * s) * kept(0)) / kept(s) ** 2 - 1) };
    }
    case 'uniform':
      return { mean: 0, sd: law.halfWidth / Math.sqrt(3) };
    case 'triangular': {
      const { halfWidth, peakFraction: c } = law;
      return { mean: 0, sd: 2 * halfWidth * Math.sqrt((1 - c + c * c) / 18) };
    }
    case 'beta': {
      const { alpha, beta, halfWidth } = law;
      return { mean: 0, sd: (2 * halfWidth * Math.sqrt((alpha * beta) / (alpha + beta + 1))) / (alpha + beta) };
    }
    case 'weibull': {
      const { sd, uncutSd } = cutWeibull(law.shape, CUT_SDS);
      return { mean: 0, sd: (law.sd * sd) / uncutSd };
    }
    case 'resampled': {
      const squares = law.values.reduce((sum, value) => sum + value * value, 0);
      return { mean: 0, sd: Math.sqrt(squares / Math.max(1, law.values.length)) };
    }
    case 'mixture': {
      const mean = mixtureMean(law, nominal);
      const variance = law.parts.reduce((sum, { weight, at, law: own }) => {
        const part = lawMoments(own, nominal);
        return sum + weight * (part.sd ** 2 + (at + part.mean - mean) ** 2);
      }, 0);
      return { mean: 0, sd: law.factor * Math.sqrt(variance) };
    }
  }
}

/** Mean of the parts of a mixture before they are moved to mean 0. */
export function mixtureMean({ parts }: MixtureLaw, nominal: number): number {
  return parts.reduce((sum, { weight, at, law }) => sum + weight * (at + lawMoments(law, nominal).mean), 0);
}

function cutNormalMoments(sd: number, from: number, to: number): { readonly mean: number; readonly sd: number } {
  const kept = normalCdf(to) - normalCdf(from);
  const mean = from === -to ? 0 : (normalDensity(from) - normalDensity(to)) / kept;
  const variance = 1 + (from * normalDensity(from) - to * normalDensity(to)) / kept - mean * mean;
  return { mean: sd * mean, sd: sd * Math.sqrt(variance) };
}

function normalDensity(z: number): number {
  return Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI);
}
