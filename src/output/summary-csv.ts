import type { SummaryRow } from '../questions/answers.js';
import { CANDIDATE_COLUMN, estimateColumns, MEASURE_COLUMN, WINDOW_COLUMNS } from './estimate-columns.js';
import type { ResultColumn } from './result-column.js';

const STATISTICS =
  'twin: value of the bank with every value at its mean (an event that happens is 100 %); share_of_banks: share of the sampled banks in which the event happened; mean, median, percentile_5, percentile_95: over the sampled banks.';

/** Columns of `summary.csv`: one row per candidate, measure and statistic. */
export function summaryColumns(confidencePercent: number): readonly ResultColumn<SummaryRow>[] {
  return [CANDIDATE_COLUMN, MEASURE_COLUMN, ...WINDOW_COLUMNS, ...estimateColumns(STATISTICS, confidencePercent)];
}
