import { type Measure, windowCycles } from '../measures/measure.js';
import type { ColumnValues } from '../outcomes/column-values.js';
import type { Drawn } from '../statistics/drawn.js';
import { asPooled, carryShares, meanDifferenceOf } from '../statistics/drawn-estimate.js';
import { type Estimate, isConfidence, withRemark } from '../statistics/estimate.js';
import { bonferroniConfidence, holmAdjusted } from '../statistics/holm.js';
import { mcnemarTest } from '../statistics/mcnemar-test.js';
import { meanDifferenceTest, type PairTest } from '../statistics/pair-test.js';
import type { PairedCounts } from '../statistics/paired-counts.js';
import { pairedProportionEstimate } from '../statistics/paired-proportion-estimate.js';
import { pairedShares } from '../statistics/paired-shares.js';
import { tangoEstimate } from '../statistics/tango-estimate.js';
import type { Candidate, Study } from '../study/study.js';
import { withAbsenceNoted } from './absence.js';
import type { ComparisonRow, ComparisonStatistic } from './answers.js';
import { independentBlockSize } from './drawn-of.js';
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
  /** At a two-sided confidence. */
  readonly estimateAt: (confidence: number) => Estimate;
  readonly test: PairTest;
}

const NO_TEST: PairTest = { pValue: null, method: '' };

/**
 * Answers "which is better on the same banks?": one measure of a candidate against the reference, instance by instance.
 *
 * Events: difference of the shares of banks, in points. Amounts: mean of the differences, and the shares of banks in
 * which the candidate's value is the lower one, equal, or the higher one. Differences are candidate less reference.
 *
 * @param values of the candidate
 * @param referenceValues of the reference, on the same instances
 * @returns rows whose p values are not yet adjusted: `adjustedForFamily` does that
 */
export function compareMeasure(
  study: Study,
  { candidate, reference }: Contest,
  measure: Measure,
  values: ColumnValues,
  referenceValues: ColumnValues,
): readonly ComparisonRow[] {
  const { from, to } = windowCycles(measure.window, study.cycles);
  const pairs = pairsOf(values, referenceValues, independentBlockSize(study));
  const compared =
    measure.kind === 'event' ? compareEvents(pairs) : compareAmounts(pairs, unitOfDifference(measure.unit));
  const together = bonferroniConfidence(study.confidenceFraction, study.candidates.length - 1);
  return compared.map(({ statistic, unit, estimateAt, test }) => {
    const simultaneous = isConfidence(together) ? estimateAt(together) : null;
    return {
      candidate: candidate.key,
      reference: reference.key,
      measure: measure.name,
      fromCycle: from,
      toCycle: to,
      statistic,
      unit,
      ...withAbsenceNoted(estimateAt(study.confidenceFraction), values.instances, measure.name, [candidate, reference]),
      simultaneousLower: simultaneous?.lower ?? null,
      simultaneousUpper: simultaneous?.upper ?? null,
      test: test.method,
      pValue: test.pValue,
      pValueHolm: test.pValue,
    };
  });
}

/** Comparisons with the reference whose p values are adjusted, statistic by statistic of each measure, over candidates. */
export function adjustedForFamily(rows: readonly ComparisonRow[]): readonly ComparisonRow[] {
  const families = new Map<string, { readonly index: number; readonly pValue: number }[]>();
  for (const [index, { measure, statistic, pValue }] of rows.entries()) {
    if (pValue === null) continue;
    const name = `${measure} ${statistic}`;
    families.set(name, [...(families.get(name) ?? []), { index, pValue }]);
  }
  const adjusted = [...rows];
  for (const family of families.values()) {
    const holm = holmAdjusted(family.map(({ pValue }) => pValue));
    for (const [place, { index }] of family.entries()) adjusted[index] = { ...rows[index], pValueHolm: holm[place] };
  }
  return adjusted;
}

function compareEvents(pairs: Pairs): readonly Compared[] {
  const counts = countPairs(pairs);
  const { both, onlyFirst, onlySecond, neither } = counts;
  const differences = differencesOf(pairs);
  const mcnemar = mcnemarTest(counts);
  const overBlocks = carryShares(onlyFirst + onlySecond, differences);
  const difference = (confidence: number): Estimate => {
    if (overBlocks) return meanDifferenceOf(differences, confidence);
    const pooled = pairedProportionEstimate(both, onlyFirst, onlySecond, neither, confidence);
    return withRemark(asPooled(pooled, differences), `mid-p ${mcnemar.mid.toPrecision(3)}`);
  };
  const score = (confidence: number): Estimate => asPooled(tangoEstimate(counts, confidence), differences);
  const exact: PairTest = { pValue: pairs.first.length === 0 ? null : mcnemar.exact, method: 'mcnemar-exact' };
  const unit = 'points';
  return [
    {
      statistic: 'difference_of_shares',
      unit,
      estimateAt: (confidence) => withCorrelation(inPercent(difference(confidence)), pairs),
      test: overBlocks ? meanDifferenceTest(differences) : exact.pValue === null ? NO_TEST : exact,
    },
    {
      statistic: 'difference_of_shares_by_score',
      unit,
      estimateAt: (confidence) => inPercent(score(confidence)),
      test: NO_TEST,
    },
  ];
}

function countPairs({ first, second }: Pairs): PairedCounts {
  const counts = { both: 0, onlyFirst: 0, onlySecond: 0, neither: 0 };
  first.forEach((one, index) => {
    if (one === second[index]) counts[one === 1 ? 'both' : 'neither'] += 1;
    else counts[one === 1 ? 'onlyFirst' : 'onlySecond'] += 1;
  });
  return counts;
}

function compareAmounts(pairs: Pairs, unit: string): readonly Compared[] {
  const differences = differencesOf(pairs);
  const share = (which: 'firstLess' | 'tie' | 'secondLess') => (confidence: number) =>
    inPercent(pairedShares(differences, EQUAL_WITHIN, confidence)[which]);
  return [
    {
      statistic: 'mean_difference',
      unit,
      estimateAt: (confidence) => withCorrelation(meanDifferenceOf(differences, confidence), pairs),
      test: meanDifferenceTest(differences),
    },
    { statistic: 'share_lower', unit: '%', estimateAt: share('firstLess'), test: NO_TEST },
    { statistic: 'share_equal', unit: '%', estimateAt: share('tie'), test: NO_TEST },
    { statistic: 'share_higher', unit: '%', estimateAt: share('secondLess'), test: NO_TEST },
  ];
}

function differencesOf({ first, second, blocks }: Pairs): Drawn {
  return { values: first.map((one, index) => one - second[index]), blocks };
}

/** Says in the note what the pairing achieved. */
function withCorrelation(estimate: Estimate, pairs: Pairs): Estimate {
  const correlation = pairedCorrelation(pairs);
  return correlation === null ? estimate : withRemark(estimate, `correlation of the pairs ${correlation.toFixed(2)}`);
}
