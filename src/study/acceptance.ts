import { z } from 'zod';
import { amount } from './amount.js';
import { didYouMean } from './nearest-name.js';
import type { Reading } from './reading.js';
import { exactlyOneOf, section } from './section.js';
import type { AcceptanceLine } from './study.js';

/** A measure that an acceptance line may name, as the caller knows it. */
export interface MeasureChoice {
  readonly name: string;
  readonly unit: string;
  readonly statistics: readonly string[];
  /** Statistic of a line that names none. */
  readonly defaultStatistic: string;
}

/** How the unit of a measure ends the key of a limit. */
export const UNIT_SUFFIXES = {
  '%': '_percent',
  Ah: '_Ah',
  'Ah/day': '_Ah_per_day',
  kWh: '_kWh',
  '%/month': '_percent_per_month',
  'per cycle': '_per_cycle',
  cycle: '_cycle',
  cycles: '_cycles',
  A: '_A',
  V: '_V',
  mV: '_mV',
  h: '_h',
  days: '_days',
  'per year': '_per_year',
  'min/day': '_min_per_day',
  '': '',
} as const;

type Suffix = (typeof UNIT_SUFFIXES)[keyof typeof UNIT_SUFFIXES];
type LimitKey = `at_most${Suffix}` | `at_least${Suffix}`;

const LIMIT_KEYS: readonly LimitKey[] = Object.values(UNIT_SUFFIXES).flatMap((suffix): LimitKey[] => [
  `at_most${suffix}`,
  `at_least${suffix}`,
]);

const limit = (bound: 'most' | 'least', unit: string) =>
  amount(
    { atLeast: -1e9, atMost: 1e9 },
    {
      description: `The measure must be at ${bound} this; it has ${unit === '' ? 'no unit' : `the unit ${unit}`}.`,
    },
  ).optional();
const limits = Object.fromEntries(
  Object.entries(UNIT_SUFFIXES).flatMap(([unit, suffix]) => [
    [`at_most${suffix}`, limit('most', unit)],
    [`at_least${suffix}`, limit('least', unit)],
  ]),
) as Record<LimitKey, ReturnType<typeof limit>>;

const LINE = section({
  measure: z
    .string('the name of a measure')
    .meta({ description: 'A measure by its name in summary.csv, such as load_lost.' }),
  statistic: z
    .string('a statistic of the measure')
    .meta({
      description:
        'As in summary.csv. Default: share_of_banks of an event, of an amount its bad tail (percentile_95, or percentile_5).',
    })
    .optional(),
  ...limits,
}).refine(exactlyOneOf(...LIMIT_KEYS)[0], 'a line with exactly one limit such as at_most_percent or at_least_Ah');

/** The section `acceptance`: lines a candidate must meet. */
export const ACCEPTANCE = z
  .array(LINE, 'a list of lines such as {measure: load_lost, at_most_percent: 5}')
  .max(50, 'a list of at most 50 lines');

type LineInput = z.infer<typeof LINE>;

/** @returns the lines, their measures and units checked against what the caller knows */
export function resolveAcceptance(
  input: readonly LineInput[],
  choices: readonly MeasureChoice[],
  reading: Reading,
): readonly AcceptanceLine[] {
  const lines: AcceptanceLine[] = [];
  for (const [index, line] of input.entries()) {
    const path = ['acceptance', index];
    const measure = choices.find(({ name }) => name === line.measure);
    if (measure === undefined) {
      reading.fault(
        [...path, 'measure'],
        'a known measure',
        didYouMean(
          line.measure,
          choices.map(({ name }) => name),
        ),
      );
      continue;
    }
    const statistic = line.statistic ?? measure.defaultStatistic;
    if (!measure.statistics.includes(statistic)) {
      const rule = `a statistic of ${measure.name}: ${measure.statistics.join(', ')}`;
      reading.fault([...path, 'statistic'], rule, didYouMean(statistic, measure.statistics));
      continue;
    }
    const key = LIMIT_KEYS.find((limitKey) => line[limitKey] !== undefined);
    if (key === undefined) continue;
    const bound = key.startsWith('at_most') ? 'at_most' : 'at_least';
    const wanted = `${bound}${suffixOf(measure.unit)}`;
    if (key !== wanted) {
      reading.faultWith([...path, key], `must be ${wanted} for ${measure.name}, got "${key}"`);
      continue;
    }
    const value = line[key] ?? 0;
    lines.push({ measure: measure.name, statistic, bound: bound === 'at_most' ? 'at-most' : 'at-least', limit: value });
    reading.origins.push({
      path: `acceptance[${index}]`,
      value: `${measure.name}, ${statistic} ${bound === 'at_most' ? '<=' : '>='} ${value}`,
      unit: measure.unit,
      source: 'study',
    });
  }
  return lines;
}

function suffixOf(unit: string): string {
  return Object.hasOwn(UNIT_SUFFIXES, unit) ? UNIT_SUFFIXES[unit as keyof typeof UNIT_SUFFIXES] : '';
}
