import { type FinishedBlock, instancesDue } from '../execution/plan.js';
import type { Progress } from '../execution/progress.js';
import { blockFile, type RunFolder } from '../execution/run-folder.js';
import type { RunLog } from '../execution/run-log.js';
import { isSystemError } from '../execution/system-error.js';
import { OutcomeFault } from '../outcomes/outcome-fault.js';
import { renderRunning } from '../output/running-text.js';
import { RunningEstimates } from '../questions/running-estimates.js';
import type { Study } from '../study/study.js';

const EVERY_MS = 60_000;
const round = (value: number): number => Number(value.toPrecision(4));

/** Tells every minute how a run stands: how fast, how long still, and what the blocks so far say. */
export class RunWatch {
  readonly #study: Study;
  readonly #folder: RunFolder;
  readonly #progress: Progress;
  readonly #log: RunLog;
  readonly #estimates: RunningEstimates;
  readonly #finished = new Map<string, FinishedBlock>();
  #timer: NodeJS.Timeout | undefined;
  #telling: Promise<void> = Promise.resolve();
  #banks = 0;

  constructor(study: Study, folder: RunFolder, progress: Progress, log: RunLog) {
    this.#study = study;
    this.#folder = folder;
    this.#progress = progress;
    this.#log = log;
    this.#estimates = new RunningEstimates(study);
  }

  /** Tells of a block that is in the folder, found there or computed. */
  finished(block: FinishedBlock, isComputed: boolean): void {
    this.#finished.set(blockFile(block), block);
    if (isComputed && block.block > 0) this.#banks += instancesDue(this.#study, block.block);
  }

  start(everyMs = EVERY_MS): void {
    this.#timer = setInterval(() => {
      // One after the other: reading many blocks may take longer than the interval.
      this.#telling = this.#telling.then(() => this.#tell());
      // A fault comes out at `stop`, after the blocks in flight are kept, not in the middle of the run.
      this.#telling.catch(() => undefined);
    }, everyMs);
  }

  async stop(): Promise<void> {
    clearInterval(this.#timer);
    await this.#telling;
  }

  async #tell(): Promise<void> {
    const before = this.#estimates.instances;
    await this.#takeIn();
    this.#progress.tick();
    const rows = this.#estimates.rows();
    const { instances } = this.#estimates;
    if (instances > before) for (const line of renderRunning(rows, instances)) this.#progress.line(line);
    const { done, total, elapsedMs, leftMs } = this.#progress.state;
    this.#log.write({
      event: 'progress',
      blocks_done: done,
      blocks_total: total,
      elapsed_s: round(elapsedMs / 1000),
      banks_per_s: elapsedMs > 0 ? round((this.#banks * 1000) / elapsedMs) : null,
      left_s: leftMs === null ? null : round(leftMs / 1000),
      instances,
      estimates: rows.map(({ candidate, measure, statistic, unit, estimate, lower, upper }) => ({
        candidate,
        measure,
        statistic,
        unit,
        estimate,
        lower,
        upper,
      })),
    });
  }

  /** Takes in what every candidate has by now; a block that was spoilt or removed meanwhile is left to whoever verifies. */
  async #takeIn(): Promise<void> {
    for (let next = this.#estimates.next; next.length > 0; next = this.#estimates.next) {
      const blocks = next.flatMap((task) => this.#finished.get(blockFile(task)) ?? []);
      if (blocks.length < next.length) return;
      try {
        const texts = await Promise.all(blocks.map((block) => this.#folder.read(blockFile(block))));
        this.#estimates.take(blocks.map(({ failed = [] }, index) => ({ csv: texts[index] ?? '', failed })));
      } catch (error) {
        if (error instanceof OutcomeFault || isSystemError(error)) return;
        throw error;
      }
    }
  }
}
