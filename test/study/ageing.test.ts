import { describe, expect, it } from 'vitest';
import { meanModules } from '../../src/sampling/mean-modules.js';
import { sampleModules } from '../../src/sampling/sample-modules.js';
import { simulationKey } from '../../src/study/simulation-key.js';
import type { Study } from '../../src/study/study.js';
import { explicitOf, populationOf, read, studyOf, studyWith, studyWithStock } from './study-under-test.js';

const RATED = 'rated_Ah: 100';
const keyOf = (study: Study): string => {
  const [candidate] = study.candidates;
  if (candidate === undefined) throw new RangeError('no candidate');
  return simulationKey(study, candidate);
};
const house = (...lines: string[]) => studyOf(studyWithStock([RATED, ...lines]));

describe('ageing in a study', () => {
  it('is off unless a law is named, and then leaves no trace in key and stock', () => {
    const plain = house();
    const none = house('ageing: {law: none, initial_fade_percent: 5}');
    expect(Object.keys(populationOf(plain, 'house'))).not.toContain('ageing');
    expect(keyOf(none)).toBe(keyOf(plain));
    expect(keyOf(house('ageing: {law: naumann}'))).not.toBe(keyOf(plain));
    expect(keyOf(house('ageing: {law: naumann, rate: 1.1}'))).not.toBe(keyOf(house('ageing: {law: naumann}')));
    expect(sampleModules(plain, 1).get('A1')).not.toHaveProperty('ageing');
  });

  it('has defaults, and units', () => {
    expect(populationOf(house('ageing: {law: wang-2011}'), 'house').ageing).toEqual({
      law: 'wang-2011',
      initialFadeFraction: 0,
      resistanceGrowth: 5,
    });
    const written = 'ageing: {law: naumann, initial_fade_percent: 8, resistance_growth: 2, rate: 1.5}';
    const study = house(written);
    expect(populationOf(study, 'house').ageing).toEqual({
      law: 'naumann',
      initialFadeFraction: 0.08,
      resistanceGrowth: 2,
    });
    expect(sampleModules(study, 1).get('A1')?.ageing?.rate).toBe(1.5);
  });

  it('is copied with a stock, key by key, and can be taken away from the copy', () => {
    const text = studyWithStock(
      [RATED, 'ageing: {law: naumann, rate: 1.5}'],
      `  copy: {like: house, modules: [B1], ageing: {initial_fade_percent: 10}}
  plain: {like: house, modules: [C1], ageing: {law: none}}
`,
    );
    expect(populationOf(studyOf(text), 'copy').ageing).toMatchObject({ law: 'naumann', initialFadeFraction: 0.1 });
    expect(populationOf(studyOf(text), 'copy').quantities.ageingRate.nominal).toBe(1.5);
    expect(populationOf(studyOf(text), 'plain').ageing).toBeUndefined();
  });

  it('spreads by module without moving any other draw, and stands at its mean in the twin', () => {
    const spread = house('ageing: {law: naumann, rate: {nominal: 1.2, module_sd_percent: 15}}');
    const rates = ['A1', 'A2', 'A3'].map((id) => sampleModules(spread, 1).get(id)?.ageing?.rate);
    expect(new Set(rates).size).toBe(3);
    const { ageing: _ageing, ...others } = sampleModules(spread, 1).get('A1') ?? {};
    expect(others).toEqual(sampleModules(house(), 1).get('A1'));
    expect(meanModules(spread).get('A1')?.ageing?.rate).toBe(1.2);
  });

  it('is told of modules written down, and of their defaults', () => {
    const text = studyWith({}).replace(
      'house: {modules: [A1, A2, A3, A4], rated_Ah: 100}',
      `house:
    defaults: {capacity_Ah: 100, ageing: {law: wang-2011, rate: 2}}
    modules: {A1: {}, A2: {ageing: {rate: 3}}, A3: {ageing: {law: none}}, A4: {}}`,
    );
    expect(explicitOf(studyOf(text), 'house').modules.map(({ ageing }) => ageing?.rate)).toEqual([2, 3, undefined, 2]);
  });

  it('is printed by check where it is on', () => {
    const told = (...lines: string[]) => {
      const result = read(studyWithStock([RATED, ...lines]));
      if (result.kind === 'refused') throw new Error('refused');
      return result.origins.filter(({ path }) => path.includes('ageing')).map(({ path, value }) => `${path} ${value}`);
    };
    expect(told()).toEqual([]);
    expect(told('ageing: {law: naumann}')).toEqual([
      'stock.house.ageing.law naumann',
      'stock.house.ageing.initial_fade_percent 0',
      'stock.house.ageing.resistance_growth 5',
      'stock.house.ageing.rate 1',
    ]);
  });
});
