import type { Statistic } from '../measures/measure.js';
import type { Drawn } from '../statistics/drawn.js';
import { asPooled, meanOf } from '../statistics/drawn-estimate.js';
import type { Estimate } from '../statistics/estimate.js';
import { quantileEstimate } from '../statistics/quantile-estimate.js';

/** An estimate and the statistic that it estimates. */
interface StatisticEstimate extends Estimate {
  readonly statistic: Statistic;
}

/**
 * Estimates statistics of an amount over the sampled banks that have it.
 *
 * @param drawn one value per bank that has one; not changed
 * @param confidence two-sided, e.g. 0.95
 * @returns an estimate per statistic in the order asked for, in the unit of the values
 * @throws RangeError if asked for the share of banks, which amounts do not have
 */
export function amountEstimates(
  drawn: Drawn,
  statistics: readonly Statistic[],
  confidence: number,
): readonly StatisticEstimate[] {
  return statistics.map((statistic) => ({
    ...(statistic === 'mean'
      ? meanOf(drawn, confidence)
      : asPooled(quantileEstimate(drawn.values, probabilityOf(statistic), confidence), drawn)),
    statistic,
  }));
}

/** @throws RangeError for a share of banks, which is no percentile */
export function probabilityOf(statistic: Exclude<Statistic, 'mean'>): number {
  switch (statistic) {
    case 'median':
      return 0.5;
    case 'percentile_5':
      return 0.05;
    case 'percentile_95':
      return 0.95;
    case 'share_of_banks':
      throw new RangeError('an amount has no share of banks');
  }
}
