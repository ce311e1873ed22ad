import type { ColumnValues } from '../outcomes/column-values.js';
import type { Estimate } from '../statistics/estimate.js';
import { lineVerdict } from '../statistics/line-verdict.js';
import { proportionEstimate } from '../statistics/proportion-estimate.js';
import { quantileRanks } from '../statistics/quantile-estimate.js';
import type { AcceptanceLine } from '../study/study.js';
import { probabilityOf } from './amount-estimate.js';
import type { SummaryRow } from './answers.js';
import { inPercent } from './estimate-unit.js';

/** More banks than any study may have. */
const MOST_BANKS = 10_000_000;

/**
 * About how many sampled banks would decide an acceptance line if what was seen of it stayed in the same proportion.
 *
 * Shares: the least number whose interval no longer straddles the limit. Percentiles: the same of the share of banks
 * within the limit, by the ranks of the interval. Means: the interval narrowed with the root of the number.
 *
 * @param row that was held against the line and did not decide it
 * @param values of the measure
 * @param confidence two-sided, that of the row
 * @returns null if no number would: the figure lies on the line, or has no interval to go by
 */
export function decidingCount(
  line: AcceptanceLine,
  row: SummaryRow,
  values: ColumnValues,
  confidence: number,
): number | null {
  const seen = values.present.length;
  if (seen === 0) return null;
  const count = countAmongPresent(line, row, values.present, confidence);
  if (count === null) return null;
  const all = Math.ceil((count * values.instances) / seen);
  return all > MOST_BANKS ? null : all;
}

function countAmongPresent(
  line: AcceptanceLine,
  { statistic, ...estimate }: SummaryRow,
  present: Float64Array,
  confidence: number,
): number | null {
  const seen = present.length;
  switch (statistic) {
    case 'twin':
      return null;
    case 'mean':
      return meanCount(line, estimate);
    case 'share_of_banks': {
      const events = present.reduce((sum, one) => sum + one, 0);
      return leastAbove(seen, (n) => {
        const share = inPercent(proportionEstimate(Math.round((events / seen) * n), n, confidence));
        return lineVerdict(share, line.bound, line.limit) !== 'not decided';
      });
    }
    default: {
      const isBelow = (value: number): boolean => (line.bound === 'at-most' ? value <= line.limit : value < line.limit);
      const below = present.reduce((sum, value) => sum + (isBelow(value) ? 1 : 0), 0);
      return leastAbove(seen, (n) => {
        const ranks = quantileRanks(n, probabilityOf(statistic), confidence);
        const belowOfN = Math.round((below / seen) * n);
        return ranks !== null && (belowOfN >= ranks.upper || belowOfN < ranks.lower);
      });
    }
  }
}

function meanCount({ limit }: AcceptanceLine, { estimate, lower, upper, instances }: Estimate): number | null {
  if (estimate === null || lower === null || upper === null || estimate === limit) return null;
  const reach = estimate < limit ? upper - estimate : estimate - lower;
  return Math.ceil(instances * (reach / (limit - estimate)) ** 2);
}

/** A number above `from` for which something holds and for one less it does not, found by doubling and halving. */
function leastAbove(from: number, holds: (n: number) => boolean): number | null {
  let below = from;
  let above = 2 * from;
  while (!holds(above)) {
    if (above > MOST_BANKS) return null;
    below = above;
    above *= 2;
  }
  while (above - below > 1) {
    const middle = Math.floor((below + above) / 2);
    if (holds(middle)) above = middle;
    else below = middle;
  }
  return above;
}
