/** Where an instance lies in the sample; block and index count from 1. */
export interface BlockAddress {
  readonly block: number;
  readonly index: number;
}

/**
 * @param instance from 1
 * @param blockSize instances in a block
 * @throws RangeError if one of them is not a whole number from 1
 */
export function blockAddress(instance: number, blockSize: number): BlockAddress {
  for (const count of [instance, blockSize]) {
    if (!(Number.isSafeInteger(count) && count >= 1)) {
      throw new RangeError(`instance and block size must be whole numbers from 1, got ${instance} and ${blockSize}`);
    }
  }
  const before = (instance - 1) % blockSize;
  return { block: (instance - 1 - before) / blockSize + 1, index: before + 1 };
}
