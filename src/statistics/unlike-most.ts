/**
 * How many values are unlike the one that more than half of them share (found by Boyer and Moore's vote).
 *
 * @returns null if no value has such a majority
 */
export function countUnlikeMost(values: Float64Array): number | null {
  let candidate = Number.NaN;
  let lead = 0;
  for (const value of values) {
    if (lead === 0) candidate = value;
    lead += value === candidate ? 1 : -1;
  }
  const alike = values.reduce((count, value) => count + (value === candidate ? 1 : 0), 0);
  return 2 * alike > values.length ? values.length - alike : null;
}
