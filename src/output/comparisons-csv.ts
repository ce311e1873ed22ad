import type { ComparisonRow } from '../questions/answers.js';
import { CANDIDATE_COLUMN, estimateColumns, MEASURE_COLUMN, WINDOW_COLUMNS } from './estimate-columns.js';
import type { ResultColumn } from './result-column.js';

const STATISTICS =
  'Candidate less reference on the same sampled banks. difference_of_shares: of the shares of banks in which the event happened; mean_difference: mean over the banks of the difference of the amount; share_lower, share_equal, share_higher: share of the banks in which the amount of the candidate is lower, equal within 0.000001 of its unit, higher.';

const REFERENCE_COLUMN: ResultColumn<ComparisonRow> = {
  name: 'reference',
  type: 'string',
  title: 'reference',
  description: 'Key of the candidate that it is compared with.',
  ucum: null,
  required: true,
  value: (row) => row.reference,
};

/** Columns of `comparisons.csv`: each candidate but the reference against it, measure by measure. */
export function comparisonColumns(confidencePercent: number): readonly ResultColumn<ComparisonRow>[] {
  return [
    CANDIDATE_COLUMN,
    REFERENCE_COLUMN,
    MEASURE_COLUMN,
    ...WINDOW_COLUMNS,
    ...estimateColumns(STATISTICS, confidencePercent),
  ];
}
