import { z } from 'zod';
import { amount, choice } from './amount.js';
import { defaultOcvTable } from './default-ocv.js';
import { filePath } from './file-path.js';
import { NAME, NAME_RULE } from './names.js';
import { didYouMean } from './nearest-name.js';
import { readNumericTable } from './numeric-table.js';
import type { Reading } from './reading.js';
import { atMostOneOf, exactlyOneOf, named, section } from './section.js';
import type { OcvTable } from './study.js';
import type { StudyPath } from './study-path.js';

/** Name of the table that every study has. */
const DEFAULT_TABLE = 'default';

const LIST_RULE = 'a list of at least 2 ascending numbers';
const points = (range: z.ZodNumber) => z.array(range, LIST_RULE).min(2, LIST_RULE).max(10_000, LIST_RULE);
const slope = amount({ above: 0, atMost: 100_000 })
  .nullable()
  .meta({ description: 'V per unit of charge beyond the table; null = the slope of its end.', default: null })
  .optional();

const TABLE = section({
  interpolation: choice(['monotone', 'linear'], {
    description: 'Between the points: a smooth curve that never turns back, or straight lines.',
    default: 'monotone',
  }).optional(),
  charge_percent: points(amount({ atLeast: -100, atMost: 200 }))
    .meta({ description: 'Charge of the points, ascending.' })
    .optional(),
  charge_fraction: points(amount({ atLeast: -1, atMost: 2 }))
    .meta({ description: 'In place of charge_percent: 1 is full.' })
    .optional(),
  V: points(amount({ above: 0, atMost: 10 }))
    .meta({ description: 'Open-circuit voltage of a cell at each point, ascending.' })
    .optional(),
  file: filePath.meta({ description: 'CSV with the columns charge_percent or charge_fraction, and V.' }).optional(),
  slope_below_V: slope,
  slope_above_V: slope,
})
  .refine(...exactlyOneOf('V', 'file'))
  .refine(...exactlyOneOf('charge_percent', 'charge_fraction', 'file'))
  .refine(...atMostOneOf('charge_percent', 'charge_fraction'));

type TableInput = z.infer<typeof TABLE>;

/** The section `ocv`: open-circuit tables by name. */
export const OCV = named(NAME, NAME_RULE, TABLE);

/** Tables of a study by name. */
export interface OcvIndex {
  readonly tables: readonly OcvTable[];
  /** @returns index of a table; a name that is not known is a fault at `path` */
  readonly indexOf: (name: string, path: StudyPath, reading: Reading) => number;
}

/** @returns the tables of a study, the default one first */
export function resolveOcv(input: z.infer<typeof OCV> | undefined, reading: Reading): OcvIndex {
  const tables: OcvTable[] = [defaultOcvTable()];
  const indices = new Map<string, number>([[DEFAULT_TABLE, 0]]);
  for (const [name, written] of Object.entries(input ?? {})) {
    const path = ['ocv', name];
    if (name === DEFAULT_TABLE) {
      reading.faultWith(path, `must be another name, got "${name}", which is that of the built-in table`);
      continue;
    }
    const table = resolveTable(path, written, reading);
    // A faulty table keeps its name, so that stocks that use it are not blamed too.
    indices.set(name, tables.length);
    tables.push(table ?? defaultOcvTable());
  }
  return {
    tables,
    indexOf: (name, path, to) => {
      const index = indices.get(name);
      if (index === undefined && !to.isIncomplete(['ocv', name])) {
        to.fault(path, 'the name of a table under ocv', didYouMean(name, [...indices.keys()]));
      }
      return index ?? 0;
    },
  };
}

function resolveTable(path: StudyPath, written: TableInput, reading: Reading): OcvTable | undefined {
  const read =
    written.file === undefined ? inlinePoints(path, written, reading) : filePoints(path, written.file, reading);
  if (read === undefined) return undefined;
  return {
    interpolation: written.interpolation ?? 'monotone',
    chargeFraction: read.chargeFraction,
    voltageV: read.voltageV,
    slopeBelowV: written.slope_below_V ?? null,
    slopeAboveV: written.slope_above_V ?? null,
  };
}

interface Points {
  readonly chargeFraction: readonly number[];
  readonly voltageV: readonly number[];
}

function inlinePoints(path: StudyPath, written: TableInput, reading: Reading): Points | undefined {
  const inPercent = written.charge_percent !== undefined;
  const key = inPercent ? 'charge_percent' : 'charge_fraction';
  const charge = written[key] ?? [];
  const voltageV = written.V ?? [];
  let sound = true;
  for (const [name, values] of [
    [key, charge],
    ['V', voltageV],
  ] as const) {
    const index = firstNotAscending(values);
    if (index === undefined) continue;
    reading.fault([...path, name, index], 'above the value before it');
    sound = false;
  }
  if (charge.length !== voltageV.length) {
    reading.fault([...path, 'V'], `a list of ${charge.length} values, as many as ${key}`);
    sound = false;
  }
  return sound ? { chargeFraction: inPercent ? charge.map((value) => value / 100) : charge, voltageV } : undefined;
}

function filePoints(path: StudyPath, file: string, reading: Reading): Points | undefined {
  const text = reading.textOf([...path, 'file'], file);
  if (text === undefined) return undefined;
  const inPercent = !/^[^\r\n]*charge_fraction/.test(text);
  const key = inPercent ? 'charge_percent' : 'charge_fraction';
  const scale = inPercent ? 100 : 1;
  const read = readNumericTable(text, file, [
    { name: key, atLeast: -scale, atMost: 2 * scale },
    { name: 'V', atLeast: 0.001, atMost: 10 },
  ]);
  if ('problems' in read) {
    reading.problems.push(...read.problems);
    return undefined;
  }
  const { columns, problemAt } = read.table;
  const charge = columns.get(key) ?? [];
  const voltageV = columns.get('V') ?? [];
  let sound = charge.length >= 2;
  if (!sound) reading.fault([...path, 'file'], 'a table of at least 2 rows');
  for (const [name, values] of [
    [key, charge],
    ['V', voltageV],
  ] as const) {
    const index = firstNotAscending(values);
    if (index === undefined) continue;
    reading.problems.push(problemAt(index, name, `must be above the value before it, got ${values[index]}`));
    sound = false;
  }
  return sound ? { chargeFraction: charge.map((value) => value / scale), voltageV } : undefined;
}

function firstNotAscending(values: readonly number[]): number | undefined {
  for (let index = 1; index < values.length; index++) {
    if (!((values[index] ?? 0) > (values[index - 1] ?? 0))) return index;
  }
  return undefined;
}
