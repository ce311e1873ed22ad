import type { MeasureName } from '../measures/registry.js';
import { type Estimate, withRemark } from '../statistics/estimate.js';
import type { Candidate } from '../study/study.js';

/** Measures that compare the modules of a string, and so need more than one BMS in it. */
const BETWEEN_MODULES: ReadonlySet<string> = new Set<MeasureName>([
  'drift',
  'drift_charge',
  'drift_growth',
  'drift_past_limit',
  'drift_past_limit_first_cycle',
  'charge_spread_at_end_of_charge',
]);

/** Note of an estimate that cannot be made because the candidate's wiring leaves nothing to measure. */
export const ONE_BMS_NOTE = 'not applicable: one BMS over the full series length';

/**
 * The estimate with what it leaves out said in its note.
 *
 * @param estimate over the instances that have a value
 * @param instances all that were looked at
 * @param candidates whose values went into the estimate
 * @returns the estimate as it is if every instance has a value; without any, an empty one that says why
 */
export function withAbsenceNoted(
  estimate: Estimate,
  instances: number,
  measure: string,
  candidates: readonly Candidate[],
): Estimate {
  const present = estimate.instances;
  if (present === instances && instances > 0) return estimate;
  if (present > 0) return withRemark(estimate, `over the ${present} of ${instances} sampled banks that have a value`);
  const note =
    BETWEEN_MODULES.has(measure) && candidates.some(hasOneBmsPerString) ? ONE_BMS_NOTE : 'absent in every sampled bank';
  return { estimate: null, lower: null, upper: null, method: '', note, instances };
}

/** Whether a single BMS watches the full series length of the candidate's strings. */
function hasOneBmsPerString(candidate: Candidate): boolean {
  return candidate.wiring === 'native' || candidate.strings.every((string) => string.length === 1);
}
