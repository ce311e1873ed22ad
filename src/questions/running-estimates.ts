import { type MeasureName, measureNamed } from '../measures/registry.js';
import { type BlockTask, blockCount, blockInstances, type FailedInstance, outcomeLayout } from '../outcomes/block.js';
import { decodeBlock } from '../outcomes/block-csv.js';
import { ColumnValues } from '../outcomes/column-values.js';
import { outcomeColumns } from '../outcomes/columns.js';
import { columnIndex } from '../outcomes/outcome-store.js';
import type { AcceptanceLine, Candidate, Study } from '../study/study.js';
import type { SummaryRow } from './answers.js';
import { summariseMeasure } from './summary.js';

/** A measure that is watched while a run goes on, and a statistic that it has. */
export type WatchedMeasure = Pick<AcceptanceLine, 'measure' | 'statistic'>;

const WITHOUT_ACCEPTANCE: readonly MeasureName[] = ['early_cutoff_on_charge', 'load_lost'];

/** What the acceptance lines of a study speak of; without any, how often a cutoff comes early and load is lost. */
function watchedMeasures({ acceptance }: Study): readonly WatchedMeasure[] {
  if (acceptance.length === 0) {
    return WITHOUT_ACCEPTANCE.map((measure) => ({ measure, statistic: 'share_of_banks' }));
  }
  const watched = new Map(
    acceptance.map(({ measure, statistic }) => [`${measure} ${statistic}`, { measure, statistic }]),
  );
  return [...watched.values()];
}

/**
 * Estimates of the watched measures while blocks still come in: from the sampled banks that every candidate has, counted
 * from the first without a gap, as the results of an interrupted run. Holds eight bytes per instance and measure.
 */
export class RunningEstimates {
  readonly #study: Study;
  readonly #columns: ReadonlyMap<string, ReadonlyMap<string, Float64Array>>;
  readonly watched: readonly WatchedMeasure[];
  #blocks = 0;

  constructor(study: Study) {
    this.#study = study;
    this.watched = watchedMeasures(study);
    const names = new Set(this.watched.map(({ measure }) => measure));
    const columnsOf = () => new Map([...names].map((name) => [name, new Float64Array(study.instances)]));
    this.#columns = new Map(study.candidates.map(({ key }) => [key, columnsOf()]));
  }

  /** Sampled banks behind the estimates. */
  get instances(): number {
    return Math.min(this.#study.instances, this.#blocks * this.#study.blockSize);
  }

  /** Blocks to be taken in next, one per candidate; none if all are. */
  get next(): readonly BlockTask[] {
    if (this.#blocks >= blockCount(this.#study)) return [];
    return this.#study.candidates.map(({ key }) => ({ candidate: key, block: this.#blocks + 1 }));
  }

  /**
   * Takes in the blocks of `next`.
   *
   * @param blocks in that order, as they were written, with the instances that have no row: every value of theirs is absent
   * @throws OutcomeFault if one is not a block of this study
   */
  take(blocks: readonly { readonly csv: string; readonly failed: readonly FailedInstance[] }[]): void {
    const range = blockInstances(this.#blocks + 1, this.#study);
    for (const [index, candidate] of this.#study.candidates.entries()) {
      const layout = outcomeColumns(outcomeLayout(this.#study, candidate));
      const { csv, failed } = blocks[index] ?? { csv: '', failed: [] };
      const rows = decodeBlock(layout, range, csv, failed);
      for (const [name, values] of this.#columns.get(candidate.key) ?? []) {
        const place = columnIndex(layout, name);
        for (const { instance } of failed) values[instance - 1] = Number.NaN;
        for (const row of rows) values[row.instance - 1] = row.values[place] ?? Number.NaN;
      }
    }
    this.#blocks++;
  }

  /** @returns a row per watched measure and candidate, measure by measure; none before the first blocks */
  rows(): readonly SummaryRow[] {
    if (this.instances === 0) return [];
    return this.watched.flatMap((one) => this.#study.candidates.flatMap((candidate) => this.#rowOf(one, candidate)));
  }

  #rowOf({ measure: name, statistic }: WatchedMeasure, candidate: Candidate): readonly SummaryRow[] {
    const measure = measureNamed(name);
    const values = this.#columns.get(candidate.key)?.get(name);
    if (measure === undefined || values === undefined) return [];
    // A copy, because an estimate may keep what it is given and the rest of the column is not there yet.
    const column = new ColumnValues(values.slice(0, this.instances));
    return summariseMeasure(this.#study, candidate, measure, column, null).filter((row) => row.statistic === statistic);
  }
}
