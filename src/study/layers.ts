import type { OriginSource } from './origin.js';
import type { Reading } from './reading.js';
import { showValue } from './show-value.js';
import { renderPath, type StudyPath } from './study-path.js';
import { siFromKey, unitOfKey } from './units.js';

/** One source of the keys of a section: what the author wrote, what is copied, what a grade says, the defaults. */
export interface Layer<T> {
  readonly source: OriginSource;
  /** Where its keys stand in the study; meaningless but harmless for grades and defaults. */
  readonly path: StudyPath;
  readonly values: T;
}

/** A value with where it comes from. */
export interface Picked<V> {
  readonly value: V;
  readonly source: OriginSource;
  /** Where it is written: the place to point at if it is wrong. */
  readonly path: StudyPath;
}

type Present<V> = Exclude<V, undefined>;
type Inner<V> = Extract<Present<V>, object>;

/** A section seen through its layers: for every key the first layer that has it wins. */
export class Layers<T extends object> {
  /**
   * @param owner path of the section in the resolved study
   * @param layers the first wins
   */
  constructor(
    readonly owner: StudyPath,
    readonly layers: readonly Layer<T>[],
  ) {}

  /** @returns the value of a key from the first layer that has it, undefined if none has */
  pick<K extends keyof T & string>(key: K): Picked<Present<T[K]>> | undefined {
    for (const { source, path, values } of this.layers) {
      const value = values[key];
      if (value !== undefined) return { value: value as Present<T[K]>, source, path: [...path, key] };
    }
    return undefined;
  }

  /** @returns the section under a key, seen through the layers that have it */
  inside<K extends keyof T & string>(key: K): Layers<Inner<T[K]>> {
    const inner: Layer<Inner<T[K]>>[] = [];
    for (const { source, path, values } of this.layers) {
      const value = values[key];
      if (typeof value === 'object' && value !== null) {
        inner.push({ source, path: [...path, key], values: value as Inner<T[K]> });
      }
    }
    return new Layers([...this.owner, key], inner);
  }

  /** @returns these layers with another one below them */
  over(layer: Layer<T>): Layers<T> {
    return new Layers(this.owner, [...this.layers, layer]);
  }

  /**
   * Value of a key that some layer is known to have, noted with its origin.
   *
   * @throws RangeError if no layer has it: a hole in the defaults is a fault of this program
   */
  setting<K extends keyof T & string>(key: K, reading: Reading): Present<T[K]> {
    const picked = this.pick(key);
    if (picked === undefined) throw new RangeError(`no default for ${renderPath([...this.owner, key])}`);
    const path = renderPath([...this.owner, key]);
    const value = typeof picked.value === 'string' ? picked.value : showValue(picked.value);
    reading.origins.push({ path, value, unit: unitOfKey(key), source: picked.source });
    return picked.value;
  }

  /** As `setting`, for a number: in the units of the resolved study. */
  si<K extends NumberKey<T>>(key: K, reading: Reading): number {
    const value: unknown = this.setting(key, reading);
    if (typeof value !== 'number') throw new RangeError(`${renderPath([...this.owner, key])} is no number`);
    return siFromKey(key, value);
  }

  /** As `si`, where null means that there is none. */
  siOrNull<K extends keyof T & string>(key: K, reading: Reading): number | null {
    const value: unknown = this.setting(key, reading);
    return typeof value === 'number' ? siFromKey(key, value) : null;
  }
}

type NumberKey<T> = { [K in keyof T & string]: Present<T[K]> extends number ? K : never }[keyof T & string];
