import { z } from 'zod';
import { type MeasureChoice, UNIT_SUFFIXES } from './acceptance.js';
import { amount, count } from './amount.js';
import { didYouMean } from './nearest-name.js';
import type { Reading } from './reading.js';
import { exactlyOneOf, section } from './section.js';
import type { Enough, Study, WatchedEstimate } from './study.js';

/** Before this many blocks the width of an interval is too uncertain itself to stop at. */
const LEAST_BLOCKS = 16;

/** Verdicts share what the confidence leaves among the looks; quantiles are checked up to this confidence. */
const MOST_CONFIDENCE = 0.9999;

/** Half-widths of percentages are points. */
function halfWidthKey(suffix: string): string {
  return `half_width${suffix.replace('_percent', '_points')}`;
}

const HALF_WIDTH_KEYS = Object.values(UNIT_SUFFIXES).map(halfWidthKey);

const WATCHED = section({
  measure: z
    .string('the name of a measure')
    .meta({ description: 'A measure by its name in summary.csv, such as load_lost.' }),
  statistic: z
    .string('a statistic of the measure')
    .meta({ description: 'As in summary.csv. Default: as of an acceptance line.' })
    .optional(),
  ...Object.fromEntries(
    Object.entries(UNIT_SUFFIXES).map(([unit, suffix]) => [
      halfWidthKey(suffix),
      amount(
        { above: 0, atMost: 1e9 },
        {
          description: `Half the width at which its interval is narrow enough; ${unit === '' ? 'no unit' : `unit ${unit.replace('%', 'points')}`}.`,
        },
      ).optional(),
    ]),
  ),
}).refine(exactlyOneOf(...HALF_WIDTH_KEYS)[0], 'an estimate with exactly one half-width such as half_width_points');

/** The section `enough`: the run ends at a look at which all intervals are narrow enough. */
export const ENOUGH = section({
  watch: z
    .array(WATCHED, 'a list such as {measure: load_lost, half_width_points: 2}')
    .min(1, 'a list of at least one estimate')
    .max(20, 'a list of at most 20 estimates')
    .meta({ description: 'Estimates, each of every candidate, that have to be narrow.' }),
  looks: z
    .array(count({ atLeast: LEAST_BLOCKS, atMost: 10_000_000 }, {}), 'a list of numbers of sampled banks')
    .min(1, 'a list of at least one number')
    .max(10, 'a list of at most 10 numbers')
    .meta({
      description:
        'Numbers of sampled banks at which the run may end, whole blocks, 16 or more; instances is the last. Default: 16 blocks, then twice as many each.',
    })
    .optional(),
});

type EnoughInput = z.infer<typeof ENOUGH>;

/** What of a study the looks depend on. */
type Sizing = Pick<Study, 'instances' | 'blockSize' | 'confidenceFraction'>;

/**
 * @param isOverridden the number of instances comes from the command line: looks that it does not reach fall away
 * @returns the looks, the last of them at all instances; undefined after a fault
 */
export function resolveEnough(
  input: EnoughInput,
  sizing: Sizing,
  isOverridden: boolean,
  choices: readonly MeasureChoice[],
  reading: Reading,
): Enough | undefined {
  const watched = input.watch.flatMap((one, index) => resolveWatched(one, index, choices, reading));
  const looks = resolveLooks(input.looks, sizing, isOverridden, reading);
  if (looks === undefined || watched.length < input.watch.length) return undefined;
  const alpha = (1 - sizing.confidenceFraction) / looks.length;
  if (alpha < 1 - MOST_CONFIDENCE) {
    reading.faultWith(
      ['enough'],
      `must be of fewer looks, or go with a lower confidence_percent: verdicts at ${looks.length} looks take ${Number(((1 - alpha) * 100).toPrecision(8))} %, above 99.99`,
    );
    return undefined;
  }
  const source = input.looks === undefined ? 'default' : 'study';
  reading.origins.push({ path: 'enough.looks', value: looks.join(', '), unit: '', source });
  return { looks, watched };
}

function resolveLooks(
  written: readonly number[] | undefined,
  { instances, blockSize }: Sizing,
  isOverridden: boolean,
  reading: Reading,
): readonly number[] | undefined {
  const least = LEAST_BLOCKS * blockSize;
  if (instances <= least && !isOverridden) {
    reading.fault(['enough'], `absent unless instances is above ${LEAST_BLOCKS} blocks, ${least}`);
    return undefined;
  }
  const looks = written ?? doubled(least, instances);
  for (const [index, look] of looks.entries()) {
    const before = looks[index - 1] ?? least - 1;
    if (look % blockSize !== 0 || !(look > before) || !(look < instances || isOverridden)) {
      reading.fault(
        ['enough', 'looks', index],
        `a multiple of the block size ${blockSize}, above ${before} and below instances, ${instances}`,
      );
      return undefined;
    }
  }
  return [...looks.filter((look) => look < instances), instances];
}

function doubled(least: number, instances: number): readonly number[] {
  const looks: number[] = [];
  for (let look = least; look < instances; look *= 2) looks.push(look);
  return looks;
}

function resolveWatched(
  input: EnoughInput['watch'][number],
  index: number,
  choices: readonly MeasureChoice[],
  reading: Reading,
): readonly WatchedEstimate[] {
  const path = ['enough', 'watch', index];
  const measure = choices.find(({ name }) => name === input.measure);
  if (measure === undefined) {
    const names = choices.map(({ name }) => name);
    reading.fault([...path, 'measure'], 'a known measure', didYouMean(input.measure, names));
    return [];
  }
  const statistic = input.statistic ?? measure.defaultStatistic;
  if (!measure.statistics.includes(statistic)) {
    const rule = `a statistic of ${measure.name}: ${measure.statistics.join(', ')}`;
    reading.fault([...path, 'statistic'], rule, didYouMean(statistic, measure.statistics));
    return [];
  }
  const given = Object.entries(input).find(([key]) => HALF_WIDTH_KEYS.includes(key));
  const suffix = Object.entries(UNIT_SUFFIXES).find(([unit]) => unit === measure.unit)?.[1] ?? '';
  const wanted = halfWidthKey(suffix);
  if (given === undefined || typeof given[1] !== 'number') return [];
  if (given[0] !== wanted) {
    reading.faultWith([...path, given[0]], `must be ${wanted} for ${measure.name}, got "${given[0]}"`);
    return [];
  }
  reading.origins.push({
    path: `enough.watch[${index}]`,
    value: `${measure.name}, ${statistic} +-${given[1]}`,
    unit: measure.unit.replace('%', 'points'),
    source: 'study',
  });
  return [{ measure: measure.name, statistic, halfWidth: given[1] }];
}
