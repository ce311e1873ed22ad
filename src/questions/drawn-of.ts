import type { ColumnValues } from '../outcomes/column-values.js';
import type { Drawn } from '../statistics/drawn.js';
import { bindsBlocks } from '../study/sampling-plan.js';
import type { Study } from '../study/study.js';

/** Instances in a block where the plan of the study makes only whole blocks independent of each other; else null. */
export function independentBlockSize({ plan, blockSize }: Study): number | null {
  return bindsBlocks(plan) ? blockSize : null;
}

/**
 * The values of a column that are there, with the block of each.
 *
 * @param blockSize as from `independentBlockSize`
 */
export function drawnOf(column: ColumnValues, blockSize: number | null): Drawn {
  const values = column.present;
  if (blockSize === null) return { values, blocks: null };
  const blocks = new Int32Array(values.length);
  let count = 0;
  for (let instance = 1; instance <= column.instances; instance++) {
    if (column.at(instance) !== null) blocks[count++] = Math.ceil(instance / blockSize);
  }
  return { values, blocks };
}
