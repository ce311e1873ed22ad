import type { Layers } from './layers.js';

/**
 * Which of two keys that tell the same in two ways holds: the one that the first layer with either of them has, so that a
 * candidate which writes one of them is not overruled by a bank which writes the other.
 *
 * @returns the first key if no layer has either
 */
export function firstKeyOf<T extends object, A extends keyof T & string, B extends keyof T & string>(
  { layers }: Layers<T>,
  first: A,
  second: B,
): A | B {
  for (const { values } of layers) {
    if (values[first] !== undefined) return first;
    if (values[second] !== undefined) return second;
  }
  return first;
}
