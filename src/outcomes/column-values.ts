/**
 * One column over instances 1 to n.
 *
 * Eight bytes per instance. An absent value is NaN inside only, so that it can never be summed by mistake: `present`
 * leaves it out and `at` gives null.
 */
export class ColumnValues {
  readonly #values: Float64Array;
  readonly absent: number;
  #present: Float64Array | undefined;

  /** @param values by instance from 1, NaN where absent; taken over, not copied */
  constructor(values: Float64Array) {
    this.#values = values;
    let absent = 0;
    for (const value of values) if (Number.isNaN(value)) absent++;
    this.absent = absent;
  }

  /** Number of instances, absent values included. */
  get instances(): number {
    return this.#values.length;
  }

  /** The values that are there, in order of instances. Belongs to the column: sort a copy. */
  get present(): Float64Array {
    this.#present ??= this.absent === 0 ? this.#values : this.#values.filter((value) => !Number.isNaN(value));
    return this.#present;
  }

  /** The same column over instances 1 to `instances` only. */
  first(instances: number): ColumnValues {
    return new ColumnValues(this.#values.subarray(0, instances));
  }

  /**
   * @param instance from 1
   * @returns the value of that instance, null where the measure does not apply
   * @throws RangeError if there is no such instance
   */
  at(instance: number): number | null {
    const value = this.#values[instance - 1];
    if (value === undefined) throw new RangeError(`no instance ${instance} among ${this.#values.length}`);
    return Number.isNaN(value) ? null : value;
  }
}
