import type { Statistic } from '../measures/measure.js';
import type { Estimate } from '../statistics/estimate.js';
import type { LineVerdict } from '../statistics/line-verdict.js';
import type { PackKind } from '../study/packs.js';
import type { AcceptanceLine } from '../study/study.js';

/** What is said of a measure of one candidate; `twin` is the value of the bank with every value at its mean. */
export type SummaryStatistic = Statistic | 'twin';

/** An estimate of one statistic of one measure of one candidate, in `unit`. */
export interface SummaryRow extends Estimate {
  readonly candidate: string;
  readonly measure: string;
  /** First and last cycle that the measure speaks of, from 1. */
  readonly fromCycle: number;
  readonly toCycle: number;
  readonly statistic: SummaryStatistic;
  readonly unit: string;
}

/** An estimate of one statistic over the sampled banks at the end of one cycle. */
export interface ByCycleRow extends Estimate {
  readonly candidate: string;
  readonly measure: string;
  readonly cycle: number;
  readonly statistic: Statistic;
  readonly unit: string;
}

/** What is compared, bank by bank: a candidate's value less that of the reference, or how often it is the lower one. */
export type ComparisonStatistic =
  | 'difference_of_shares'
  | 'mean_difference'
  | 'share_lower'
  | 'share_equal'
  | 'share_higher';

/** A comparison of one candidate with the reference on the same instances, in `unit`. */
export interface ComparisonRow extends Estimate {
  readonly candidate: string;
  readonly reference: string;
  readonly measure: string;
  readonly fromCycle: number;
  readonly toCycle: number;
  readonly statistic: ComparisonStatistic;
  readonly unit: string;
}

/** Words, never colours; `not applicable` if the candidate's wiring has no such measure at all. */
export type Verdict = LineVerdict | 'not applicable';

/** One acceptance line put to one candidate. */
export interface LineAnswer {
  readonly line: AcceptanceLine;
  readonly verdict: Verdict;
  /** The row of the summary that was held against the line. */
  readonly row: SummaryRow;
}

/** All acceptance lines put to one candidate; `verdict` is null if the study has none. */
export interface CandidateVerdict {
  readonly candidate: string;
  readonly verdict: Verdict | null;
  readonly lines: readonly LineAnswer[];
}

/** The sampled bank that did worst, to be replayed. */
export interface HardestCase {
  readonly candidate: string;
  /** From 1. */
  readonly instance: number;
  readonly lostCapacityPercent: number | null;
  readonly loadLostCycles: number | null;
}

/** What a candidate of packs is beside the candidates of modules. */
export interface PackAnswer {
  readonly candidate: string;
  readonly kind: PackKind;
}

/** Everything a run says about its study. Amounts are in the unit that the row names; percent, never fractions. */
export interface Answers {
  /** Instances behind the answers: fewer than the study asks for if the run was interrupted. */
  readonly instances: number;
  readonly confidencePercent: number;
  /** Candidate by candidate in the order of the study, measures in registry order, the twin first. */
  readonly summary: readonly SummaryRow[];
  readonly byCycle: readonly ByCycleRow[];
  readonly comparisons: readonly ComparisonRow[];
  readonly verdicts: readonly CandidateVerdict[];
  /** Candidates of packs that are no like-for-like purchase, with what they are. */
  readonly packs: readonly PackAnswer[];
  /** Null if no instance has a lost capacity or lost load. */
  readonly hardestCase: HardestCase | null;
}
