import { describe, expect, it } from 'vitest';
import { windowCycles } from '../../src/measures/measure.js';
import { CYCLE_MEASURES, MEASURES, measureNamed } from '../../src/measures/registry.js';

describe('windowCycles', () => {
  // By hand, first and last cycle.
  it.each([
    ['horizon', 180, 1, 180],
    ['last-30', 180, 151, 180],
    ['last-30', 30, 1, 30],
    ['last-30', 29, 1, 29],
    ['last-7', 180, 174, 180],
    ['last-7', 3, 1, 3],
    ['first', 180, 1, 1],
    ['last', 180, 180, 180],
  ] as const)('%s of %d cycles is %d to %d', (window, cycles, from, to) => {
    expect(windowCycles(window, cycles)).toEqual({ from, to });
  });
});

describe('the registry', () => {
  it('names each measure once, in snake case', () => {
    for (const list of [MEASURES, CYCLE_MEASURES]) {
      const names = list.map(({ name }) => name);
      expect(new Set(names).size).toBe(names.length);
      for (const name of names) expect(name).toMatch(/^[a-z][a-z0-9_]*$/);
    }
  });

  it('finds measures by name', () => {
    for (const measure of MEASURES) expect(measureNamed(measure.name)).toBe(measure);
    expect(measureNamed('no_such_measure')).toBeUndefined();
    expect(measureNamed('constructor')).toBeUndefined();
  });

  it('gives every measure a title, a definition and the statistics of its kind', () => {
    for (const { title, definition, kind, statistics } of MEASURES) {
      expect(title.length * definition.length).toBeGreaterThan(0);
      expect(statistics.includes('share_of_banks')).toBe(kind === 'event');
    }
  });
});
