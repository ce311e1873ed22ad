import type { ComparisonRow } from '../questions/answers.js';
import { CANDIDATE_COLUMN, estimateColumns, MEASURE_COLUMN, WINDOW_COLUMNS } from './estimate-columns.js';
import type { ResultColumn } from './result-column.js';

const STATISTICS =
  'Candidate less reference on the same sampled banks. difference_of_shares: of the shares of banks in which the event happened; difference_of_shares_by_score: the same with its score interval; mean_difference: mean over the banks of the difference of the amount; share_lower, share_equal, share_higher: share of the banks in which the amount of the candidate is lower, equal within 0.000001 of its unit, higher.';

const REFERENCE_COLUMN: ResultColumn<ComparisonRow> = {
  name: 'reference',
  type: 'string',
  title: 'reference',
  description: 'Key of the candidate that it is compared with.',
  ucum: null,
  required: true,
  value: (row) => row.reference,
};

/** Columns that a comparison has beside those of every estimate. */
const FAMILY_COLUMNS: readonly ResultColumn<ComparisonRow>[] = [
  {
    name: 'simultaneous_lower',
    type: 'number',
    title: 'simultaneous lower end',
    description:
      'Lower end of the interval that holds, with the confidence stated, together with those of all other candidates for this measure and statistic (Bonferroni).',
    ucum: null,
    required: false,
    value: (row) => row.simultaneousLower,
  },
  {
    name: 'simultaneous_upper',
    type: 'number',
    title: 'simultaneous upper end',
    description: 'Upper end of that interval.',
    ucum: null,
    required: false,
    value: (row) => row.simultaneousUpper,
  },
  {
    name: 'test',
    type: 'string',
    title: 'test',
    description: 'Test that there is no difference; empty if there is none.',
    ucum: null,
    required: false,
    value: (row) => row.test,
  },
  {
    name: 'p_value',
    type: 'number',
    title: 'p value',
    description: 'Two-sided probability of a difference at least as large as this one if there were none.',
    ucum: '1',
    required: false,
    value: (row) => row.pValue,
  },
  {
    name: 'p_value_holm',
    type: 'number',
    title: 'p value, adjusted',
    description:
      'The same, adjusted over all candidates for this measure and statistic (Holm): to decide which differ, not to measure by how much.',
    ucum: '1',
    required: false,
    value: (row) => row.pValueHolm,
  },
];

/** Columns of `comparisons.csv`: each candidate but the reference against it, measure by measure. */
export function comparisonColumns(confidencePercent: number): readonly ResultColumn<ComparisonRow>[] {
  return [
    CANDIDATE_COLUMN,
    REFERENCE_COLUMN,
    MEASURE_COLUMN,
    ...WINDOW_COLUMNS,
    ...estimateColumns(STATISTICS, confidencePercent),
    ...FAMILY_COLUMNS,
  ];
}
