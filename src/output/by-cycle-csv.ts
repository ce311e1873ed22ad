import type { ByCycleRow } from '../questions/answers.js';
import { CANDIDATE_COLUMN, estimateColumns, MEASURE_COLUMN } from './estimate-columns.js';
import type { ResultColumn } from './result-column.js';

const STATISTICS =
  'mean, median, percentile_5, percentile_95: over the sampled banks, at the end of the cycle; share_without: share of the banks in which the event of the measure has not happened by the end of the cycle (product-limit curve, banks without one censored at the last cycle). Intervals hold for each cycle by itself.';

const CYCLE_COLUMN: ResultColumn<ByCycleRow> = {
  name: 'cycle',
  type: 'integer',
  title: 'cycle',
  description: 'Cycle at whose end the measure was recorded, counted from 1.',
  ucum: '{cycle}',
  required: true,
  value: (row) => row.cycle,
};

/** Columns of `by-cycle.csv`: one row per candidate, measure, checkpoint cycle and statistic. */
export function byCycleColumns(confidencePercent: number): readonly ResultColumn<ByCycleRow>[] {
  return [CANDIDATE_COLUMN, MEASURE_COLUMN, CYCLE_COLUMN, ...estimateColumns(STATISTICS, confidencePercent)];
}
