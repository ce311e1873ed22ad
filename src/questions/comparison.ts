import { type Measure, windowCycles } from '../measures/measure.js';
import type { ColumnValues } from '../outcomes/column-values.js';
import type { Estimate } from '../statistics/estimate.js';
import { pairedMeanEstimate } from '../statistics/mean-estimate.js';
import { pairedProportionEstimate } from '../statistics/paired-proportion-estimate.js';
import { pairedShares } from '../statistics/paired-shares.js';
import type { Candidate, Study } from '../study/study.js';
import { withAbsenceNoted, withNote } from './absence.js';
import type { ComparisonRow, ComparisonStatistic } from './answers.js';
import { inPercent, unitOfDifference } from './estimate-unit.js';
import { type Pairs, pairedCorrelation, pairsOf } from './pairs.js';

/** Amounts that differ by no more than this, in the measure's unit, are equal: far below what the model resolves. */
const EQUAL_WITHIN = 1e-6;

/** The two sides of a comparison. */
interface Contest {
  readonly candidate: Candidate;
  readonly reference: Candidate;
}

interface Compared {
  readonly statistic: ComparisonStatistic;
  readonly unit: string;
  readonly estimate: Estimate;
}

/**
 * Answers "which is better on the same banks?": one measure of a candidate against the reference, instance by instance.
 *
 * Events: difference of the shares of banks, in points. Amounts: mean of the differences, and the shares of banks in
 * which the candidate's value is the lower one, equal, or the higher one. Differences are candidate less reference.
 *
 * @param values of the candidate
 * @param referenceValues of the reference, on the same instances
 */
export function compareMeasure(
  study: Study,
  { candidate, reference }: Contest,
  measure: Measure,
  values: ColumnValues,
  referenceValues: ColumnValues,
): readonly ComparisonRow[] {
  const { from, to } = windowCycles(measure.window, study.cycles);
  const pairs = pairsOf(values, referenceValues);
  const compared =
    measure.kind === 'event'
      ? [compareEvents(pairs, study.confidenceFraction)]
      : compareAmounts(pairs, unitOfDifference(measure.unit), study.confidenceFraction);
  return compared.map(({ statistic, unit, estimate }) => ({
    candidate: candidate.key,
    reference: reference.key,
    measure: measure.name,
    fromCycle: from,
    toCycle: to,
    statistic,
    unit,
    ...withAbsenceNoted(estimate, values.instances, measure.name, [candidate, reference]),
  }));
}

function compareEvents(pairs: Pairs, confidence: number): Compared {
  const counts = { both: 0, onlyFirst: 0, onlySecond: 0, neither: 0 };
  pairs.first.forEach((first, index) => {
    const second = pairs.second[index];
    if (first === second) counts[first === 1 ? 'both' : 'neither'] += 1;
    else counts[first === 1 ? 'onlyFirst' : 'onlySecond'] += 1;
  });
  const { both, onlyFirst, onlySecond, neither } = counts;
  const estimate = inPercent(pairedProportionEstimate(both, onlyFirst, onlySecond, neither, confidence));
  return { statistic: 'difference_of_shares', unit: 'points', estimate: withCorrelation(estimate, pairs) };
}

function compareAmounts(pairs: Pairs, unit: string, confidence: number): readonly Compared[] {
  const differences = pairs.first.map((first, index) => first - pairs.second[index]);
  const shares = pairedShares(differences, EQUAL_WITHIN, confidence);
  const mean = withCorrelation(pairedMeanEstimate(differences, confidence), pairs);
  return [
    { statistic: 'mean_difference', unit, estimate: mean },
    { statistic: 'share_lower', unit: '%', estimate: inPercent(shares.firstLess) },
    { statistic: 'share_equal', unit: '%', estimate: inPercent(shares.tie) },
    { statistic: 'share_higher', unit: '%', estimate: inPercent(shares.secondLess) },
  ];
}

/** Says in the note what the pairing achieved. */
function withCorrelation(estimate: Estimate, pairs: Pairs): Estimate {
  const correlation = pairedCorrelation(pairs);
  return correlation === null ? estimate : withNote(estimate, `correlation of the pairs ${correlation.toFixed(2)}`);
}
