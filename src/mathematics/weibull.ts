import type { Distribution } from './distribution.js';
import { lowerGammaShare } from './incomplete-gamma.js';
import { logGamma } from './log-gamma.js';

/** A Weibull law on condition that its values lie within some standard deviations of its mean. */
export interface CutWeibull extends Distribution {
  /** Standard deviation that the law has without the cut. */
  readonly uncutSd: number;
}

/**
 * Weibull law of scale 1 and shape k, on condition that its values lie within `cutSd` standard deviations of its mean.
 *
 *   F(x) = 1 - exp(-x^k);   E X^n = Gamma(1 + n / k)
 *   between a and b:  E X^n = Gamma(1 + n / k) (P(1 + n / k, b^k) - P(1 + n / k, a^k)) / (exp(-a^k) - exp(-b^k))
 *
 * P is the regularised lower incomplete gamma function (put t = x^k into the integral of x^n dF).
 *
 * @param shape k, 0.5 to 100
 * @throws RangeError if it is not
 */
export function cutWeibull(shape: number, cutSd: number): CutWeibull {
  if (!(shape >= 0.5 && shape <= 100))
    throw new RangeError(`the shape of a Weibull law must be 0.5 to 100, got ${shape}`);
  const whole = (n: number): number => Math.exp(logGamma(1 + n / shape));
  const uncutSd = Math.sqrt(whole(2) - whole(1) ** 2);
  const lower = Math.max(0, whole(1) - cutSd * uncutSd);
  const upper = whole(1) + cutSd * uncutSd;
  const [from, to] = [lower ** shape, upper ** shape];
  const above = Math.exp(-from);
  const kept = above - Math.exp(-to);
  const moment = (n: number): number =>
    (whole(n) * (lowerGammaShare(1 + n / shape, to) - lowerGammaShare(1 + n / shape, from))) / kept;
  const mean = moment(1);
  return {
    mean,
    sd: Math.sqrt(moment(2) - mean * mean),
    uncutSd,
    lower,
    upper,
    cdf: (x) => {
      if (x <= lower) return 0;
      return x >= upper ? 1 : (above - Math.exp(-(x ** shape))) / kept;
    },
    // x^k = -ln(exp(-a^k) - u kept) = -ln(exp(-b^k) + (1 - u) kept): each keeps its digits near its own end.
    quantile: (u) => {
      const power = u < 0.5 ? from - Math.log1p((-u * kept) / above) : -Math.log(Math.exp(-to) + (1 - u) * kept);
      return power ** (1 / shape);
    },
  };
}
