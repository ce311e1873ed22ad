import type { ColumnValues } from '../outcomes/column-values.js';

/** Values of two candidates on the same instances, where both have one. */
export interface Pairs {
  readonly first: Float64Array;
  readonly second: Float64Array;
  /** As in `Drawn`: number of the block of each pair, null where instances are independent. */
  readonly blocks: Int32Array | null;
}

/**
 * Pairs two columns by instance; an instance that lacks either value is left out.
 *
 * @param first as many instances as `second`
 * @param blockSize as from `independentBlockSize`
 */
export function pairsOf(first: ColumnValues, second: ColumnValues, blockSize: number | null): Pairs {
  const most = Math.min(first.present.length, second.present.length);
  const kept = { first: new Float64Array(most), second: new Float64Array(most) };
  const blocks = blockSize === null ? null : new Int32Array(most);
  let count = 0;
  for (let instance = 1; instance <= first.instances; instance++) {
    const one = first.at(instance);
    const other = second.at(instance);
    if (one === null || other === null) continue;
    kept.first[count] = one;
    kept.second[count] = other;
    if (blocks !== null && blockSize !== null) blocks[count] = Math.ceil(instance / blockSize);
    count += 1;
  }
  return {
    first: kept.first.subarray(0, count),
    second: kept.second.subarray(0, count),
    blocks: blocks?.subarray(0, count) ?? null,
  };
}

/**
 * Correlation achieved by pairing (Pearson's r): the closer to 1, the more the common instances sharpen a comparison.
 *
 * @returns -1 to 1; null below two pairs or if one side does not vary
 */
export function pairedCorrelation({ first, second }: Pick<Pairs, 'first' | 'second'>): number | null {
  // One pass around running means: sums of raw products would lose the digits of large values that hardly differ.
  const means = { first: 0, second: 0 };
  const sums = { first: 0, second: 0, product: 0 };
  for (let index = 0; index < first.length; index++) {
    const fromFirst = first[index] - means.first;
    const fromSecond = second[index] - means.second;
    means.first += fromFirst / (index + 1);
    means.second += fromSecond / (index + 1);
    sums.first += fromFirst * (first[index] - means.first);
    sums.second += fromSecond * (second[index] - means.second);
    sums.product += fromFirst * (second[index] - means.second);
  }
  const scale = Math.sqrt(sums.first * sums.second);
  return scale > 0 ? Math.max(-1, Math.min(1, sums.product / scale)) : null;
}
