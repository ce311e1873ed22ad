import type { Estimate } from '../statistics/estimate.js';

/** A share estimated as a fraction, in percent; a difference of fractions, in points. */
export function inPercent(estimate: Estimate): Estimate {
  return {
    ...estimate,
    estimate: timesHundred(estimate.estimate),
    lower: timesHundred(estimate.lower),
    upper: timesHundred(estimate.upper),
  };
}

/** Unit of the difference of two values of `unit`: percentages differ by points. */
export function unitOfDifference(unit: string): string {
  return unit.replace(/^%/, 'points');
}

function timesHundred(fraction: number | null): number | null {
  return fraction === null ? null : fraction * 100;
}
