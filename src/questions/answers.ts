import type { Statistic } from '../measures/measure.js';
import type { Estimate } from '../statistics/estimate.js';
import type { LineVerdict } from '../statistics/line-verdict.js';
import type { PairTest } from '../statistics/pair-test.js';
import type { PackKind } from '../study/packs.js';
import type { AcceptanceLine } from '../study/study.js';
import type { BlocksOfBanks } from './least-blocks.js';

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

/** What is said of a checkpoint cycle; `share_without`: of banks without a first event so far. */
export type ByCycleStatistic = Statistic | 'share_without';

/** An estimate of one statistic over the sampled banks at the end of one cycle. */
export interface ByCycleRow extends Estimate {
  readonly candidate: string;
  readonly measure: string;
  readonly cycle: number;
  readonly statistic: ByCycleStatistic;
  readonly unit: string;
}

/**
 * What is compared, bank by bank: a candidate's value less that of the reference, or how often it is the lower one. The
 * difference of shares comes a second time with its score interval.
 */
export type ComparisonStatistic =
  | 'difference_of_shares'
  | 'difference_of_shares_by_score'
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
  /** Interval that holds together with those of all other candidates for this measure and statistic (Bonferroni). */
  readonly simultaneousLower: number | null;
  readonly simultaneousUpper: number | null;
  /** Test that there is no difference: empty where there is none. */
  readonly test: PairTest['method'];
  /** Two-sided. */
  readonly pValue: number | null;
  /** The same, adjusted for all other candidates (Holm). */
  readonly pValueHolm: number | null;
}

/** Words, never colours; `not applicable` if the candidate's wiring has no such measure at all. */
export type Verdict = LineVerdict | 'not applicable';

/** One acceptance line put to one candidate. */
export interface LineAnswer {
  readonly line: AcceptanceLine;
  readonly verdict: Verdict;
  /** What was held against the line: the row of the summary, at the confidence of verdicts. */
  readonly row: SummaryRow;
  /** About how many sampled banks would decide a line that is not decided; null if none would. */
  readonly wouldDecide: number | null;
  /** What a line that is not decided takes to have an interval at all; null if blocks do not keep it from one. */
  readonly least: BlocksOfBanks | null;
}

/** All acceptance lines put to one candidate; `verdict` is null if the study has none. */
export interface CandidateVerdict {
  readonly candidate: string;
  readonly verdict: Verdict | null;
  readonly lines: readonly LineAnswer[];
}

/** How narrow a watched estimate of one candidate was at a look. */
export interface WatchedWidth {
  readonly candidate: string;
  readonly measure: string;
  readonly statistic: string;
  /** Of the measure; the widths of percentages are points. */
  readonly unit: string;
  /** Null if there was no interval. */
  readonly halfWidth: number | null;
  readonly wanted: number;
  /** Also where the measure does not apply to the candidate. */
  readonly narrow: boolean;
}

/** What was seen at a number of banks at which the run could end. */
export interface Look {
  readonly instances: number;
  readonly watched: readonly WatchedWidth[];
  readonly enough: boolean;
}

/** The looks of a run and its end: all narrow, the maximum reached, or interrupted before either. */
export interface EnoughAnswer {
  /** Numbers of banks at which the run could end. */
  readonly schedule: readonly number[];
  /** Those that it took. */
  readonly looks: readonly Look[];
  readonly end: 'narrow' | 'maximum' | 'unfinished';
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
  /** Instances behind the answers: fewer than the study asks for if they were enough or the run was interrupted. */
  readonly instances: number;
  /** Null if the number of instances is fixed. */
  readonly enough: EnoughAnswer | null;
  readonly confidencePercent: number;
  /** Of the intervals that verdicts rest on. */
  readonly verdictConfidencePercent: number;
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
