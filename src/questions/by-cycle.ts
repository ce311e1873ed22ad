import type { Statistic } from '../measures/measure.js';
import type { ColumnValues } from '../outcomes/column-values.js';
import type { OutcomeColumn } from '../outcomes/columns.js';
import type { Candidate, Study } from '../study/study.js';
import { withAbsenceNoted } from './absence.js';
import { amountEstimates } from './amount-estimate.js';
import type { ByCycleRow } from './answers.js';
import { drawnOf, independentBlockSize } from './drawn-of.js';

const STATISTICS: readonly Statistic[] = ['mean', 'median', 'percentile_5', 'percentile_95'];

/**
 * Answers "how does it come about?": one measure at the end of one checkpoint cycle over the sampled banks.
 *
 * @param column a column of the candidate's outcomes
 * @returns rows for the mean, the median and the 5th and 95th percentile; none if the column is no checkpoint
 */
export function summariseCheckpoint(
  study: Study,
  candidate: Candidate,
  column: OutcomeColumn,
  values: ColumnValues,
): readonly ByCycleRow[] {
  const { measure, cycle, unit } = column;
  if (measure === null || cycle === null) return [];
  return amountEstimates(drawnOf(values, independentBlockSize(study)), STATISTICS, study.confidenceFraction).map(
    ({ statistic, ...estimate }) => ({
      candidate: candidate.key,
      measure,
      cycle,
      statistic,
      unit,
      ...withAbsenceNoted(estimate, values.instances, measure, [candidate]),
    }),
  );
}
