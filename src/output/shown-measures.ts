import type { Measure, Statistic } from '../measures/measure.js';
import { type MeasureName, measureNamed } from '../measures/registry.js';
import type { Answers } from '../questions/answers.js';

/** A measure and the statistic of it that a decision rests on. */
export interface ShownMeasure {
  readonly measure: Measure;
  readonly statistic: Statistic;
}

const EVENTS: readonly MeasureName[] = ['early_cutoff_on_charge', 'early_cutoff_on_discharge', 'load_lost'];
const AMOUNTS: readonly MeasureName[] = ['lost_capacity', 'drift', 'drift_growth'];

/** Events of the tables: without early cutoffs on discharge if neither a sampled bank nor a twin has any. */
export function shownEvents({ summary }: Answers): readonly ShownMeasure[] {
  const happens = (name: MeasureName) => summary.some((row) => row.measure === name && (row.estimate ?? 0) > 0);
  return EVENTS.filter((name) => name !== 'early_cutoff_on_discharge' || happens(name)).map((name) => ({
    measure: registered(name),
    statistic: 'share_of_banks',
  }));
}

/** Amounts of the decision table, each by its unfavourable tail. */
export function shownAmounts(): readonly ShownMeasure[] {
  return AMOUNTS.map((name) => ({ measure: registered(name), statistic: 'percentile_95' }));
}

/** @throws RangeError if the registry has no measure of that name */
export function registered(name: string): Measure {
  const measure = measureNamed(name);
  if (measure === undefined) throw new RangeError(`no measure ${name}`);
  return measure;
}
