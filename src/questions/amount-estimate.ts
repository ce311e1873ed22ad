import type { Statistic } from '../measures/measure.js';
import type { Estimate } from '../statistics/estimate.js';
import { meanEstimate } from '../statistics/mean-estimate.js';
import { quantileEstimate } from '../statistics/quantile-estimate.js';

/** An estimate and the statistic that it estimates. */
interface StatisticEstimate extends Estimate {
  readonly statistic: Statistic;
}

/**
 * Estimates statistics of an amount over the sampled banks that have it.
 *
 * @param values one per bank, any order, absent ones left out; not changed
 * @param confidence two-sided, e.g. 0.95
 * @returns an estimate per statistic in the order asked for, in the unit of `values`
 * @throws RangeError if asked for the share of banks, which amounts do not have
 */
export function amountEstimates(
  values: Float64Array,
  statistics: readonly Statistic[],
  confidence: number,
): readonly StatisticEstimate[] {
  return statistics.map((statistic) => ({
    ...(statistic === 'mean'
      ? meanEstimate(values, confidence)
      : quantileEstimate(values, probabilityOf(statistic), confidence)),
    statistic,
  }));
}

function probabilityOf(statistic: Exclude<Statistic, 'mean'>): number {
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
