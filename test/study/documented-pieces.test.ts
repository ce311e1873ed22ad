import { readdirSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { parse, stringify } from 'yaml';
import { renderProblem } from '../../src/study/problem.js';
import { read, repositoryText, studyOf, studyWith } from './study-under-test.js';

type Mapping = { readonly [key: string]: unknown };

const tables = readdirSync(new URL('../../studies/', import.meta.url)).filter((name) => name.endsWith('.csv'));
const files = Object.fromEntries(tables.map((name) => [name, repositoryText(`studies/${name}`)]));
const base: Mapping = parse(studyWith({}));

/** Every piece of YAML below a heading of the third level. */
const pieces = [...repositoryText('studies/README.md').matchAll(/^### (.+)\n[^#]*?```yaml\n([\s\S]*?)```/gm)].map(
  ([, title = '', yaml = '']) => [title, yaml] as const,
);

/** @returns the piece at its keys of a study: mappings key by key; candidates and the ways of telling a duty replace */
function placed(piece: Mapping): Mapping {
  const merged = mergedOver(base, piece);
  const { profile, phases, parts, ...others } = (piece.duty ?? {}) as Mapping;
  const course = Object.entries({ profile, phases, parts }).filter(([, value]) => value !== undefined);
  return {
    ...merged,
    ...(course.length > 0 && { duty: { ...others, ...Object.fromEntries(course) } }),
    ...(piece.candidates !== undefined && { candidates: piece.candidates }),
  };
}

function mergedOver(below: Mapping, above: Mapping): Mapping {
  const isMapping = (value: unknown): value is Mapping =>
    typeof value === 'object' && value !== null && !Array.isArray(value);
  const pairs = Object.entries(above).map(([key, value]) => {
    const under = below[key];
    return [key, isMapping(value) && isMapping(under) ? mergedOver(under, value) : value];
  });
  return { ...below, ...Object.fromEntries(pairs) };
}

describe('the pieces of studies in the README of the studies', () => {
  it('tell how to write what an example alone does not teach', () => {
    expect(pieces.map(([title]) => title)).toEqual([
      'An equaliser',
      'Upkeep',
      'Temperature',
      'Ageing',
      'Take-off and copper',
      'Conductors by wire gauge',
      'Ratings',
      'Custom wiring',
      'Measured modules',
      'Load peaks',
      'Parts of a year',
      'A sampling plan',
      'Enough banks',
    ]);
  });

  it.each(pieces)('%s: reads without a problem, and without it the study is another', (_, yaml) => {
    const result = read(stringify(placed(parse(yaml))), files);
    if (result.kind === 'refused') expect(result.problems.map(renderProblem)).toEqual([]);
    else expect(JSON.stringify(result.study)).not.toBe(JSON.stringify(studyOf(stringify(base))));
  });
});
