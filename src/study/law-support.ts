import { cutWeibull } from '../mathematics/weibull.js';
import { CUT_SDS, mixtureMean } from './law-moments.js';
import type { Law } from './study.js';

/**
 * Least and greatest deviation that a law can give after its cut, in the unit of the law.
 *
 * Lognormal: nominal (F - 1), F = exp(s u - s^2 / 2) with s^2 = ln(1 + (sd / nominal)^2), so that F has mean 1.
 *
 * @param nominal 1 if the law is relative, else the nominal value, above 0 for a lognormal law
 */
export function lawSupport(law: Law, nominal: number): { readonly lower: number; readonly upper: number } {
  switch (law.law) {
    case 'fixed':
      return { lower: 0, upper: 0 };
    case 'normal':
      return { lower: -CUT_SDS * law.sd, upper: CUT_SDS * law.sd };
    case 'truncated-normal':
      return { lower: law.lower, upper: law.upper };
    case 'triangular': {
      const mean = (2 * law.halfWidth * (1 + law.peakFraction)) / 3;
      return { lower: -mean, upper: 2 * law.halfWidth - mean };
    }
    case 'beta': {
      const mean = (2 * law.halfWidth * law.alpha) / (law.alpha + law.beta);
      return { lower: -mean, upper: 2 * law.halfWidth - mean };
    }
    case 'weibull': {
      const { lower, upper, mean, uncutSd } = cutWeibull(law.shape, CUT_SDS);
      return { lower: (law.sd * (lower - mean)) / uncutSd, upper: (law.sd * (upper - mean)) / uncutSd };
    }
    case 'resampled':
      return { lower: law.values[0] ?? 0, upper: law.values.at(-1) ?? 0 };
    case 'mixture': {
      const ends = law.parts.map(({ at, law: own }) => ({ at, ...lawSupport(own, nominal) }));
      const mean = mixtureMean(law, nominal);
      return {
        lower: law.factor * (Math.min(...ends.map(({ at, lower }) => at + lower)) - mean),
        upper: law.factor * (Math.max(...ends.map(({ at, upper }) => at + upper)) - mean),
      };
    }
    case 'uniform':
      return { lower: -law.halfWidth, upper: law.halfWidth };
    case 'lognormal': {
      const variance = Math.log1p((law.sd / nominal) ** 2);
      const reach = CUT_SDS * Math.sqrt(variance);
      return { lower: nominal * Math.expm1(-reach - variance / 2), upper: nominal * Math.expm1(reach - variance / 2) };
    }
  }
}
