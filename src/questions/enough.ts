import { measureNamed } from '../measures/registry.js';
import type { ColumnValues } from '../outcomes/column-values.js';
import type { OutcomeStore } from '../outcomes/outcome-store.js';
import type { Candidate, Study, WatchedEstimate } from '../study/study.js';
import { ONE_BMS_NOTE } from './absence.js';
import type { EnoughAnswer, Look, WatchedWidth } from './answers.js';
import { summariseMeasure } from './summary.js';

/**
 * Answers "are these enough banks?" at one look: whether every watched estimate of every candidate has the half-width
 * wanted. Depends on the first `instances` banks only, whatever else there is.
 *
 * @param instances how many of the store's are looked at
 * @throws RangeError if a watched measure or statistic does not exist
 */
export async function takeLook(study: Study, store: OutcomeStore, instances: number): Promise<Look> {
  const watched: WatchedWidth[] = [];
  for (const candidate of study.candidates) {
    for (const wanted of study.enough?.watched ?? []) {
      const values = (await store.column(candidate.key, wanted.measure)).first(instances);
      watched.push(widthOf(study, candidate, wanted, values));
    }
  }
  return { instances, watched, enough: watched.every(({ narrow }) => narrow) };
}

/**
 * The looks that a run took, and why it ended where it did.
 *
 * @returns null if the study has a fixed count
 */
export async function answerEnough(study: Study, store: OutcomeStore): Promise<EnoughAnswer | null> {
  if (study.enough === undefined) return null;
  const schedule = study.enough.looks;
  const looks: Look[] = [];
  for (const instances of schedule.filter((count) => count <= store.instances)) {
    looks.push(await takeLook(study, store, instances));
  }
  const last = looks.at(-1);
  if (last?.instances !== store.instances) return { schedule, looks, end: 'unfinished' };
  if (last.enough) return { schedule, looks, end: 'narrow' };
  return { schedule, looks, end: last.instances === study.instances ? 'maximum' : 'unfinished' };
}

function widthOf(
  study: Study,
  candidate: Candidate,
  { measure: name, statistic, halfWidth: wanted }: WatchedEstimate,
  values: ColumnValues,
): WatchedWidth {
  const measure = measureNamed(name);
  if (measure === undefined) throw new RangeError(`no measure ${name}`);
  const row = summariseMeasure(study, candidate, measure, values, null).find((one) => one.statistic === statistic);
  if (row === undefined) throw new RangeError(`${candidate.key} has no ${statistic} of ${name}`);
  const { lower, upper, note, unit } = row;
  const halfWidth = lower === null || upper === null ? null : (upper - lower) / 2;
  // A mean of equal values has an interval without width because nothing is known of others, not because all is known.
  const isKnown = halfWidth !== null && !(statistic === 'mean' && halfWidth === 0);
  const narrow = note === ONE_BMS_NOTE || (isKnown && halfWidth <= wanted);
  return { candidate: candidate.key, measure: name, statistic, unit, halfWidth, wanted, narrow };
}
