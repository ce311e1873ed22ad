import { type Measure, windowCycles } from '../measures/measure.js';
import type { ColumnValues } from '../outcomes/column-values.js';
import type { Estimate } from '../statistics/estimate.js';
import { proportionEstimate } from '../statistics/proportion-estimate.js';
import type { Candidate, Study } from '../study/study.js';
import { withAbsenceNoted } from './absence.js';
import { amountEstimates } from './amount-estimate.js';
import type { SummaryRow } from './answers.js';
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
  const estimates =
    measure.kind === 'event'
      ? statistics.map((statistic) => ({ statistic, ...shareEstimate(values.present, study.confidenceFraction) }))
      : amountEstimates(values.present, statistics, study.confidenceFraction);
  return [
    { ...about, statistic: 'twin', ...twinEstimate(measure, candidate, twin) },
    ...estimates.map(({ statistic, ...estimate }) => ({
      ...about,
      statistic,
      ...withAbsenceNoted(estimate, values.instances, measure.name, [candidate]),
    })),
  ];
}

function shareEstimate(happened: Float64Array, confidence: number): Estimate {
  const events = happened.reduce((sum, one) => sum + one, 0);
  return inPercent(proportionEstimate(events, happened.length, confidence));
}

function twinEstimate(measure: Measure, candidate: Candidate, twin: number | null): Estimate {
  if (twin === null) {
    const none = { estimate: null, lower: null, upper: null, method: '', note: '', instances: 0 };
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
