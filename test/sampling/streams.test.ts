import { describe, expect, test } from 'vitest';
import { type DrawScope, uniformsOf } from '../../src/sampling/streams.js';
import { BAND, correlation, kolmogorovBand, kolmogorovDistance } from './samples.js';

const SCOPE: DrawScope = {
  seed: '4711',
  block: 1,
  index: 1,
  stock: 'newer',
  module: 'N1',
  level: 'cell',
  cell: 1,
};

const draw = (changes: Partial<DrawScope> = {}, quantity = 'capacityAh'): number =>
  uniformsOf({ ...SCOPE, ...changes })(quantity);

describe('a uniform', () => {
  test('has the value it always had', () => {
    // Frozen on 2026-12-01 for the seeds 4711 and 0.
    expect([draw(), draw({ seed: '0' }), draw({ block: 16, index: 32 }), draw({}, 'resistanceOhm')]).toEqual([
      0.2875853455643843, 0.6052846523124588, 0.0989110171455877, 0.6754781487999888,
    ]);
  });

  test('is the same however often and in whatever order it is asked for', () => {
    const uniformOf = uniformsOf(SCOPE);
    const first = uniformOf('capacityAh');
    uniformOf('resistanceOhm');
    expect(uniformOf('capacityAh')).toBe(first);
    expect(draw()).toBe(first);
  });

  test('differs for every part of its address', () => {
    const others = [
      draw({ seed: '4712' }),
      draw({ block: 2 }),
      draw({ index: 2 }),
      draw({ stock: 'older' }),
      draw({ stock: null }),
      draw({ module: 'N2' }),
      draw({ module: null }),
      draw({ level: 'module' }),
      draw({ cell: 2 }),
      draw({ cell: null }),
      draw({}, 'resistanceOhm'),
    ];
    expect(new Set([draw(), ...others]).size).toBe(others.length + 1);
  });

  test('does not mistake ids that run together for each other', () => {
    const alike: Partial<DrawScope>[] = [
      { stock: 'ab', module: 'c' },
      { stock: 'a', module: 'bc' },
      { stock: 'abc', module: '' },
      { stock: '', module: 'abc' },
      { stock: 'a","b', module: 'c' },
      { stock: 'a', module: 'b","c' },
      { stock: 'null', module: 'c' },
      { stock: null, module: 'c' },
      { block: 1, index: 11, cell: 1 },
      { block: 11, index: 1, cell: 1 },
      { block: 1, index: 1, cell: 11 },
      { seed: '4711', block: 2 },
      { seed: '471', block: 12 },
    ];
    expect(new Set(alike.map((changes) => draw(changes))).size).toBe(alike.length);
  });

  test('takes 0 as a seed like any other, and tells seeds of the same value but another text apart', () => {
    const seeds = ['0', '1', '', '00', '0.0', '-0', 'false', 'null'];
    expect(new Set(seeds.map((seed) => draw({ seed }))).size).toBe(seeds.length);
    expect(draw({ seed: '0' })).toBe(draw({ seed: '0' }));
  });

  test('lies strictly between 0 and 1 and is uniform', () => {
    const sample = Array.from({ length: 20_000 }, (_, k) => draw({ block: k + 1 }));
    expect(Math.min(...sample)).toBeGreaterThan(0);
    expect(Math.max(...sample)).toBeLessThan(1);
    expect(kolmogorovDistance(sample, (u) => u)).toBeLessThan(kolmogorovBand(sample.length));
  });
});

describe('neighbouring draws are unrelated', () => {
  const count = 10_000;
  const sample = (changes: (k: number) => Partial<DrawScope>, quantity?: string): number[] =>
    Array.from({ length: count }, (_, k) => draw(changes(k), quantity));
  const base = sample((k) => ({ block: k + 1 }));

  test.each<[string, (k: number) => Partial<DrawScope>, string?]>([
    ['instances next to each other', (k) => ({ block: k + 2 })],
    ['indices in a block', (k) => ({ block: k + 1, index: 2 })],
    ['seeds', (k) => ({ block: k + 1, seed: '4712' })],
    ['stocks', (k) => ({ block: k + 1, stock: 'newes' })],
    ['modules', (k) => ({ block: k + 1, module: 'N2' })],
    ['levels', (k) => ({ block: k + 1, level: 'module', cell: null })],
    ['cells', (k) => ({ block: k + 1, cell: 2 })],
    ['quantities', (k) => ({ block: k + 1 }), 'resistanceOhm'],
    ['quantities that differ in a letter', (k) => ({ block: k + 1 }), 'capacityAi'],
  ])('between %s', (_, changes, quantity) => {
    // The correlation of n unrelated pairs has standard error 1/sqrt(n), as has that of their distances from 1/2.
    const other = sample(changes, quantity);
    const distance = (values: number[]): number[] => values.map((u) => Math.abs(u - 0.5));
    expect(Math.abs(correlation(base, other))).toBeLessThan(BAND / Math.sqrt(count));
    expect(Math.abs(correlation(distance(base), distance(other)))).toBeLessThan(BAND / Math.sqrt(count));
  });

  test('and the differences of neighbours are spread as they should be', () => {
    // For independent uniforms |u - v| has F(x) = 1 - (1 - x)^2; pairs do not overlap.
    const differences = Array.from({ length: count / 2 }, (_, k) =>
      Math.abs((base[2 * k] ?? Number.NaN) - (base[2 * k + 1] ?? Number.NaN)),
    );
    const distance = kolmogorovDistance(differences, (x) => 1 - (1 - x) ** 2);
    expect(distance).toBeLessThan(kolmogorovBand(differences.length));
  });
});
