import { checkpointCycles } from '../measures/checkpoint-cycles.js';
import type { MeasureName } from '../measures/registry.js';
import type { ColumnValues } from '../outcomes/column-values.js';
import { asPooled } from '../statistics/drawn-estimate.js';
import { withRemark } from '../statistics/estimate.js';
import { productLimitEstimates } from '../statistics/product-limit.js';
import type { Candidate, Study } from '../study/study.js';
import type { ByCycleRow } from './answers.js';
import { drawnOf, independentBlockSize } from './drawn-of.js';
import { inPercent } from './estimate-unit.js';

/** Measures that tell the cycle of the first event, and are absent where there was none. */
export const FIRST_EVENTS: readonly MeasureName[] = [
  'early_cutoff_on_charge_first_cycle',
  'early_cutoff_on_discharge_first_cycle',
];

/**
 * Answers "how long does it go well?": the share of banks without a first event up to the end of each checkpoint cycle,
 * as the product-limit curve. Banks that have none over the whole horizon are censored there.
 *
 * @param firstCycle of the event by bank, from 1, absent where there was none
 * @returns a row per checkpoint; its interval holds for that cycle by itself
 */
export function summariseFirstEvent(
  study: Study,
  candidate: Candidate,
  measure: MeasureName,
  firstCycle: ColumnValues,
): readonly ByCycleRow[] {
  const watched = Array.from({ length: firstCycle.instances }, (_, index) => {
    const cycle = firstCycle.at(index + 1);
    return { until: cycle ?? study.cycles, happened: cycle !== null };
  });
  const drawn = drawnOf(firstCycle, independentBlockSize(study));
  const cycles = checkpointCycles(study.cycles);
  const estimates = productLimitEstimates(watched, cycles, study.confidenceFraction);
  return estimates.map((estimate, index) => ({
    candidate: candidate.key,
    measure,
    cycle: cycles[index],
    statistic: 'share_without',
    unit: '%',
    ...inPercent(asPooled(withRemark(estimate, 'pointwise'), drawn)),
  }));
}
