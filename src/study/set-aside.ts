import type { z } from 'zod';
import { type SchemaFault, schemaFaults } from './schema-faults.js';
import type { StudyPath } from './study-path.js';

/** What is left of a study after its faulty parts were set aside. */
export interface Sound<P> {
  /** Undefined if nothing sound is left. */
  readonly value: P | undefined;
  readonly faults: readonly SchemaFault[];
  /** Paths of the parts that were taken out. */
  readonly setAside: readonly StudyPath[];
}

/**
 * Parses data; parts that break the schema are reported and set aside, so that the rest can be checked further and
 * an author hears of all faults in one go. A required part that is missing takes its enclosing part with it.
 *
 * @param partial the same schema with every section at the top optional
 */
export function parseSoundParts<P>(schema: z.ZodType<P>, partial: z.ZodType<P>, data: unknown): Sound<P> {
  const first = schema.safeParse(data);
  if (first.success) return { value: first.data, faults: [], setAside: [] };
  const faults = schemaFaults(first.error.issues, data);
  const setAside: StudyPath[] = [];
  const rest: unknown = structuredClone(data);
  let open: readonly SchemaFault[] = faults;
  // Every round takes something out or climbs, so the depth of the data bounds their number.
  for (let round = 0; round < 100; round++) {
    for (const { path } of open) {
      const taken = takeOut(rest, path);
      if (taken.length === 0) return { value: undefined, faults, setAside: [[]] };
      setAside.push(taken);
    }
    const next = partial.safeParse(rest);
    if (next.success) return { value: next.data, faults, setAside };
    open = schemaFaults(next.error.issues, rest);
  }
  return { value: undefined, faults, setAside: [[]] };
}

/** Deletes the value at a path, or the nearest enclosing one that exists. @returns the path taken out */
function takeOut(data: unknown, path: StudyPath): StudyPath {
  for (let length = path.length; length > 0; length--) {
    const parent = parentOf(data, path.slice(0, length));
    const last = path[length - 1];
    // An item of a list cannot go without renumbering the others: the list goes as a whole.
    if (last === undefined || parent === undefined || Array.isArray(parent)) continue;
    if (Object.hasOwn(parent, last)) {
      delete (parent as Record<string | number, unknown>)[last];
      return path.slice(0, length);
    }
  }
  return [];
}

function parentOf(data: unknown, path: StudyPath): object | undefined {
  let value: unknown = data;
  for (const step of path.slice(0, -1)) {
    if (typeof value !== 'object' || value === null || !Object.hasOwn(value, step)) return undefined;
    value = (value as Record<string | number, unknown>)[step];
  }
  return typeof value === 'object' && value !== null ? value : undefined;
}
