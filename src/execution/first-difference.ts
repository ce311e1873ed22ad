/** Where two pieces of plain data differ first, in the order of keys of the first. */
export interface Difference {
  /** Keys and indices joined by dots; empty for the whole. */
  readonly path: string;
  readonly before: unknown;
  readonly after: unknown;
}

/** @returns the first difference, undefined if both mean the same (order of keys aside) */
export function firstDifference(before: unknown, after: unknown, path = ''): Difference | undefined {
  if (isBranch(before) && isBranch(after) && Array.isArray(before) === Array.isArray(after)) {
    for (const key of new Set([...Object.keys(before), ...Object.keys(after)])) {
      const difference = firstDifference(before[key], after[key], path === '' ? key : `${path}.${key}`);
      if (difference !== undefined) return difference;
    }
    return undefined;
  }
  return before === after ? undefined : { path, before, after };
}

function isBranch(value: unknown): value is Readonly<Record<string, unknown>> {
  return typeof value === 'object' && value !== null;
}
