import type { ColumnValues } from '../outcomes/column-values.js';
import { LEAST_BLOCKS } from '../statistics/block-estimate.js';
import type { AcceptanceLine, Study } from '../study/study.js';
import { drawnOf, independentBlockSize } from './drawn-of.js';

/** Blocks, and the sampled banks in them. */
export interface BlocksOfBanks {
  readonly blocks: number;
  readonly banks: number;
}

/**
 * How many blocks an acceptance line takes to have an interval at all, if as many of them had a value as of those there
 * are. Only a mean, and only where the plan makes nothing but whole blocks independent, is kept from one by their number.
 *
 * @param values of the measure
 * @returns null if the blocks are enough, or do not matter, or none has a value
 */
export function leastBlocks(study: Study, line: AcceptanceLine, values: ColumnValues): BlocksOfBanks | null {
  const size = independentBlockSize(study);
  if (size === null || line.statistic !== 'mean') return null;
  const withValue = new Set(drawnOf(values, size).blocks).size;
  if (withValue === 0 || withValue >= LEAST_BLOCKS) return null;
  const blocks = Math.ceil((LEAST_BLOCKS * Math.ceil(values.instances / size)) / withValue);
  return { blocks, banks: blocks * size };
}
