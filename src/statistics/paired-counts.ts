/** Instances by what happened to them under two candidates. */
export interface PairedCounts {
  readonly both: number;
  readonly onlyFirst: number;
  readonly onlySecond: number;
  readonly neither: number;
}

/** @throws RangeError if a count is not a whole number from 0 */
export function requirePairedCounts({ both, onlyFirst, onlySecond, neither }: PairedCounts): void {
  for (const count of [both, onlyFirst, onlySecond, neither]) {
    if (!(Number.isInteger(count) && count >= 0)) throw new RangeError(`counts must be whole, from 0, got ${count}`);
  }
}
