import type { Law } from './study.js';

/** Unbounded laws are cut at so many standard deviations on either side. */
const CUT_SDS = 5;

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
    case 'uniform':
      return { lower: -law.halfWidth, upper: law.halfWidth };
    case 'lognormal': {
      const variance = Math.log1p((law.sd / nominal) ** 2);
      const reach = CUT_SDS * Math.sqrt(variance);
      return { lower: nominal * Math.expm1(-reach - variance / 2), upper: nominal * Math.expm1(reach - variance / 2) };
    }
  }
}
