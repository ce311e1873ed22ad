import type { MeasureName } from './registry.js';

/** Voltage between strings beyond which they should not be put together [common practice, no source], V. */
const JOINING_LIMIT_V = 0.05;

/** How the modules of one instance shared its current over the whole horizon. Currents are magnitudes. */
export interface SharingFacts {
  readonly strings: number;
  readonly elapsedS: number;
  readonly peakBankA: number;
  readonly rmsBankA: number;
  /** Largest of a module, which is that of a string: a string's current is that of its modules. */
  readonly peakModuleA: number;
  readonly rmsModuleA: number;
  /** Largest ratio of a module's peak to its rating; null if none is stated. */
  readonly peakOfRating: number | null;
  /** Time with any module above its continuous rating; null if none is stated. */
  readonly aboveContinuousS: number | null;
  /** Null without links. */
  readonly peakLinkA: number | null;
  readonly rmsLinkA: number | null;
  /** Largest difference of open-circuit voltage between what is tied when the bank is put together; null for one string. */
  readonly joiningV: number | null;
  readonly joiningA: number | null;
  readonly circulatingAs: number | null;
  readonly mostThroughputAs: number;
  readonly leastThroughputAs: number;
  /** Null if no path was ever open. */
  readonly blockingV: number | null;
  readonly blockingOfRating: number | null;
  readonly leadRatingA: number | null;
  readonly fuseRatingA: number | null;
  readonly linkRatingA: number | null;
}

export type SharingNames = Extract<
  MeasureName,
  | `sharing_${string}`
  | `peak_${string}`
  | 'above_continuous_rating'
  | `link_current${string}`
  | `joining_${string}`
  | 'circulating_charge'
  | 'throughput_spread'
  | `blocking_voltage${string}`
>;

/** @returns the measures of sharing, null where one does not apply */
export function sharingMeasures(facts: SharingFacts): Record<SharingNames, number | null> {
  const { strings, peakBankA, rmsBankA, peakModuleA, rmsModuleA, joiningV, circulatingAs } = facts;
  const several = strings > 1;
  const percentOf = (value: number | null, rating: number | null): number | null =>
    value === null || rating === null ? null : (100 * value) / rating;
  return {
    sharing_peak: several && peakBankA > 0 ? peakModuleA / (peakBankA / strings) : null,
    sharing_rms: several && rmsBankA > 0 ? rmsModuleA / (rmsBankA / strings) : null,
    peak_module_current: peakModuleA,
    peak_module_current_of_rating: percentOf(facts.peakOfRating, 1),
    above_continuous_rating: facts.aboveContinuousS === null ? null : facts.aboveContinuousS / 3600,
    peak_string_current_of_lead_rating: percentOf(peakModuleA, facts.leadRatingA),
    peak_string_current_of_fuse_rating: percentOf(peakModuleA, facts.fuseRatingA),
    link_current_peak: facts.peakLinkA,
    link_current_rms: facts.rmsLinkA,
    link_current_peak_of_rating: percentOf(facts.peakLinkA, facts.linkRatingA),
    joining_voltage: joiningV === null ? null : 1000 * joiningV,
    joining_voltage_past_limit: joiningV === null ? null : joiningV > JOINING_LIMIT_V ? 1 : 0,
    joining_current: facts.joiningA,
    circulating_charge: circulatingAs === null ? null : circulatingAs / 3600 / (facts.elapsedS / 86_400),
    throughput_spread: several && facts.leastThroughputAs > 0 ? facts.mostThroughputAs / facts.leastThroughputAs : null,
    blocking_voltage: facts.blockingV,
    blocking_voltage_of_rating: percentOf(facts.blockingOfRating, 1),
  };
}
