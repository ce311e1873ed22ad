import { z } from 'zod';

/**
 * Schema of a mapping with known keys only.
 *
 * The message of an unknown key is the list of the known ones, from which `schema-faults.ts` suggests the nearest.
 */
export function section<S extends z.ZodRawShape>(shape: S): z.ZodObject<S, z.core.$strict> {
  const known = Object.keys(shape).join(', ');
  return z.strictObject(shape, {
    error: (issue) => (issue.code === 'unrecognized_keys' ? known : `a mapping with keys among ${known}`),
  });
}

/** @returns schema of a mapping from names of the author's own to values, at least one */
export function named<V extends z.ZodType>(pattern: RegExp, nameRule: string, value: V) {
  return z
    .record(z.string().regex(pattern, nameRule), value, 'a mapping of names')
    .refine((mapping) => Object.keys(mapping).length > 0, 'a mapping of at least one name');
}

/** @returns refinement for `section(...).refine(...)`: exactly one of the keys is given */
export function exactlyOneOf<K extends string>(...keys: readonly K[]): [(value: Given<K>) => boolean, string] {
  return [
    (value) => keys.filter((key) => value[key] !== undefined).length === 1,
    `a mapping with exactly one of ${keys.join(', ')}`,
  ];
}

/** @returns refinement: none or one of the keys is given */
export function atMostOneOf<K extends string>(...keys: readonly K[]): [(value: Given<K>) => boolean, string] {
  return [
    (value) => keys.filter((key) => value[key] !== undefined).length <= 1,
    `a mapping with at most one of ${keys.join(', ')}`,
  ];
}

type Given<K extends string> = { readonly [key in K]?: unknown };
