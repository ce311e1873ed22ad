/** Mean of at least one value; the second pass takes off what the first one lost to rounding. */
export function meanOf(values: readonly number[]): number {
  const first = values.reduce((sum, value) => sum + value, 0) / values.length;
  return first + values.reduce((sum, value) => sum + (value - first), 0) / values.length;
}
