import { meanOf } from '../mathematics/mean.js';
import type { Reading } from './reading.js';
import type { StudyPath } from './study-path.js';
import { readTextTable } from './text-table.js';
import { siFromKey, unitOfKey } from './units.js';

/** Values beyond these are no measurement of anything in a bank. */
const GREATEST = 1e6;

/**
 * Deviations of a measured column from its mean, ascending, in the units of the resolved study.
 *
 * @param key key of the quantity, whose unit the name of the column must end in
 * @param path where the law stands that names the column
 * @returns no values after a fault
 */
export function measuredColumn(
  file: string,
  column: string,
  key: string,
  path: StudyPath,
  reading: Reading,
): readonly number[] {
  const unit = unitOfKey(key);
  if (unitOfKey(column) !== unit) {
    const rule = unit === '' ? 'the name of a column without a unit' : `the name of a column in ${unit}`;
    reading.fault([...path, 'column'], `${rule}, as ${key}`);
    return [];
  }
  const text = reading.textOf([...path, 'file'], file);
  if (text === undefined) return [];
  const read = readTextTable(text, file);
  if ('problems' in read) {
    reading.addTableProblems(read.problems);
    return [];
  }
  const { table } = read;
  if (!table.names.includes(column)) {
    reading.fault([...path, 'column'], `a column of ${file} (${table.names.join(', ')})`);
    return [];
  }
  const numbers = table.numbers(column, { atLeast: -GREATEST, atMost: GREATEST });
  if ('problems' in numbers) {
    reading.addTableProblems(numbers.problems);
    return [];
  }
  if (numbers.values.length < 2) {
    reading.fault([...path, 'file'], 'a table of at least 2 rows');
    return [];
  }
  const values = numbers.values.map((value) => siFromKey(key, value));
  const mean = meanOf(values);
  return values.map((value) => value - mean).sort((a, b) => a - b);
}
