import { type Measure, windowCycles } from '../measures/measure.js';
import type { ColumnValues } from '../outcomes/column-values.js';
import { shareOf } from '../statistics/drawn-estimate.js';
import type { Estimate } from '../statistics/estimate.js';
import type { Candidate, Study } from '../study/study.js';
import { withAbsenceNoted } from './absence.js';
import { amountEstimates } from './amount-estimate.js';
import type { SummaryRow } from './answers.js';
import { drawnOf, independentBlockSize } from './drawn-of.js';
import { inPercent } from './estimate-unit.js';

/**
 * Answers "how often, how much?": one measure of one candidate over its sampled banks.
 *
 * @param twin value of the candidate's twin, null if absent
 * @returns the twin's row, then a row per statistic of the measure; none of a measure without statistics
 */
export function summariseMeasure(
  study: Study,
  candidate: Candidate,
  measure: Measure,
  values: ColumnValues,
  twin: number | null,
): readonly SummaryRow[] {
  const { from, to } = windowCycles(measure.window, study.cycles);
  const about = { candidate: candidate.key, measure: measure.name, fromCycle: from, toCycle: to, unit: measure.unit };
  const { statistics } = measure;
  if (statistics.length === 0) return [];
  const drawn = drawnOf(values, independentBlockSize(study));
  const estimates =
    measure.kind === 'event'
      ? statistics.map((statistic) => ({ statistic, ...inPercent(shareOf(drawn, study.confidenceFraction)) }))
      : amountEstimates(drawn, statistics, study.confidenceFraction);
  return [
    { ...about, statistic: 'twin', ...twinEstimate(measure, candidate, twin) },
    ...estimates.map(({ statistic, ...estimate }) => ({
      ...about,
      statistic,
      ...withAbsenceNoted(estimate, values.instances, measure.name, [candidate]),
    })),
  ];
}

function twinEstimate(measure: Measure, candidate: Candidate, twin: number | null): Estimate {
  if (twin === null) {
    const none: Estimate = { estimate: null, lower: null, upper: null, method: '', note: '', instances: 0 };
    return withAbsenceNoted(none, 1, measure.name, [candidate]);
  }
  const estimate = measure.kind === 'event' ? twin * 100 : twin;
  return {
    estimate,
    lower: null,
    upper: null,
    method: '',
    note: 'the bank with every value at its mean',
    instances: 1,
  };
}
