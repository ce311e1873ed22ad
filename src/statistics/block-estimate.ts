import { studentQuantile } from '../mathematics/inverse-cdf.js';
import { type Estimate, notEstimable, requireConfidence } from './estimate.js';

/** Fewer independent blocks than this leave the spread between them too uncertain for an interval. */
export const LEAST_BLOCKS = 8;

/** Sums over the instances of one block that have a value. */
interface BlockSum {
  readonly count: number;
  readonly total: number;
}

/**
 * Mean of values drawn in blocks that are independent of each other, whatever holds within them: Student's interval over
 * the blocks. With T_b the sum and n_b the number of values of K blocks,
 *
 *   R = sum T_b / sum n_b,   s^2 = K / (K - 1) sum (T_b - R n_b)^2 / (sum n_b)^2,   R -+ t(K - 1) s
 *
 * which for equal n_b is Student's interval of the K block means, and else that of a ratio.
 *
 * @param values in order of `blocks`, finite, any unit
 * @param blocks number of the block of each value, ascending
 * @param confidence two-sided, e.g. 0.95
 * @returns in the unit of `values`; not estimable from fewer than eight blocks
 * @throws RangeError if the confidence lies outside 0.5 to 0.9999
 * @see Cochran 1977, Sampling Techniques, 3rd ed., sections 6.3 and 9A.2 (ratio of cluster totals)
 */
export function blockMeanEstimate(values: Float64Array, blocks: Int32Array, confidence: number): Estimate {
  requireConfidence(confidence);
  const sums = blockSums(values, blocks);
  if (sums.length < LEAST_BLOCKS) return notEstimable(values.length, `${LEAST_BLOCKS} blocks are needed`);
  const { mean, standardError } = ratioOf(sums);
  const reach = studentQuantile((1 + confidence) / 2, sums.length - 1) * standardError;
  return {
    estimate: mean,
    lower: mean - reach,
    upper: mean + reach,
    method: 'block-t',
    note: standardError === 0 ? 'all blocks equal' : `${sums.length} blocks`,
    instances: values.length,
  };
}

/** Mean and its standard error over blocks; 0 for the latter where all blocks are alike. */
export function blockMoments(
  values: Float64Array,
  blocks: Int32Array,
): { readonly blocks: number; readonly mean: number; readonly standardError: number } {
  const sums = blockSums(values, blocks);
  return { blocks: sums.length, ...ratioOf(sums) };
}

function ratioOf(sums: readonly BlockSum[]): { readonly mean: number; readonly standardError: number } {
  const count = sums.reduce((sum, block) => sum + block.count, 0);
  // About the first block's mean, so that a large common offset costs no digits and equal values give exactly 0.
  const offset = sums.length === 0 ? 0 : sums[0].total / sums[0].count;
  const excess = sums.reduce((sum, block) => sum + (block.total - offset * block.count), 0) / count;
  const squares = sums.reduce(
    (sum, block) => sum + (block.total - offset * block.count - excess * block.count) ** 2,
    0,
  );
  const blocks = sums.length;
  return { mean: offset + excess, standardError: Math.sqrt((blocks / (blocks - 1)) * squares) / count };
}

function blockSums(values: Float64Array, blocks: Int32Array): readonly BlockSum[] {
  const sums: { count: number; total: number }[] = [];
  let current = Number.NaN;
  for (const [index, value] of values.entries()) {
    if (blocks[index] !== current) {
      current = blocks[index];
      sums.push({ count: 0, total: 0 });
    }
    const block = sums[sums.length - 1];
    block.count += 1;
    block.total += value;
  }
  return sums;
}
