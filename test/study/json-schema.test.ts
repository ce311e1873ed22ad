import { describe, expect, it } from 'vitest';
import { parse } from 'yaml';
import { studyJsonSchema } from '../../src/study/study-file.js';
import { type JsonSchema, refusedAt } from './json-schema.js';
import { repositoryText } from './study-under-test.js';

const schema = studyJsonSchema() as JsonSchema;
const demo = (): Record<string, unknown> => parse(repositoryText('studies/demo.yaml'));

describe('the published JSON Schema', () => {
  it('accepts the demo study', () => {
    expect(refusedAt(schema, demo())).toBeNull();
  });

  it('is JSON and names its dialect', () => {
    expect(JSON.parse(JSON.stringify(schema))).toMatchObject({
      $schema: 'https://json-schema.org/draft/2020-12/schema',
      required: ['motleybank', 'stock', 'duty', 'candidates'],
      additionalProperties: false,
    });
  });

  it.each([
    ['an unknown key', { colour: 'red' }, '$.colour'],
    ['another format', { motleybank: 2 }, '$.motleybank'],
    ['a negative seed', { seed: -1 }, '$.seed'],
    ['a name that is none', { candidates: { 'A b': {} } }, '$.candidates.A b'],
    [
      'five modules in series',
      { candidates: { a: { wiring: 'strings', modules: [['A', 'B', 'C', 'D', 'E']] } } },
      '$.candidates.a.modules[0]',
    ],
    ['a horizon without end', { cycles: 1e9 }, '$.cycles'],
  ])('refuses %s', (_, change, place) => {
    expect(refusedAt(schema, { ...demo(), ...change })).toBe(place);
  });

  it('tells defaults and units of what it lists', () => {
    const { properties } = schema as { properties: Record<string, { default?: unknown; description?: string }> };
    expect(properties.block).toMatchObject({ default: 32, description: 'Instances in a block, a power of 2.' });
    expect(properties.cycles?.default).toBe(180);
  });
});
