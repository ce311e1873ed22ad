import { describe, expect, it } from 'vitest';
import { sampleModules } from '../../src/sampling/sample-modules.js';
import { simulationKey } from '../../src/study/simulation-key.js';
import type { Study } from '../../src/study/study.js';
import { inUnitOfKey, siFromKey } from '../../src/study/units.js';
import { explicitOf, populationOf, read, studyOf, studyWith, studyWithStock } from './study-under-test.js';

const RATED = 'rated_Ah: 100';
const keyOf = (study: Study): string => {
  const [candidate] = study.candidates;
  if (candidate === undefined) throw new RangeError('no candidate');
  return simulationKey(study, candidate);
};
const ambients = (study: Study) =>
  study.duty.parts.map(({ cycles }) => cycles.map((segments) => segments.map(({ ambientK }) => ambientK)));

describe('temperatures in a study', () => {
  it('are degC outside and kelvin inside, differences kelvin', () => {
    expect(siFromKey('below_degC', -10)).toBeCloseTo(263.15, 12);
    expect(inUnitOfKey('below_degC', 263.15)).toBeCloseTo(-10, 12);
    expect(siFromKey('temperature_offset_K', 3)).toBe(3);
    expect(siFromKey('resistance_activation_kJ_per_mol', 20)).toBe(20_000);
  });

  it('are told for the duty, for a part, for a phase: the nearest counts, 25 degC is left out', () => {
    const duty = `duty:
  ambient_degC: 10
  parts:
    - {name: a, phases: [{rest_h: 1}, {rest_h: 1, ambient_degC: -10}, {charge_for_h: 1, ambient_degC: 25}]}
    - {name: b, ambient_degC: 0, phases: [{discharge_W: 9, for_h: 1}]}`;
    expect(ambients(studyOf(studyWith({ duty })))).toEqual([[[283.15, 263.15, undefined]], [[273.15]]]);
  });

  it('are told row by row in a profile, and else by its part', () => {
    const duty = `duty:
  parts:
    - {name: a, ambient_degC: 5, profile: with.csv}
    - {name: b, ambient_degC: 5, profile: without.csv}`;
    const files = {
      'with.csv': 'time_h,ambient_degC,load_W,charge_W\n0,-10,5,0\n12,25,5,0\n',
      'without.csv': 'time_h,load_W,charge_W\n0,5,0\n',
    };
    expect(ambients(studyOf(studyWith({ duty }), files))).toEqual([[[263.15, undefined]], [[278.15]]]);
  });

  it('are printed by check: the one there is, or the coldest and the warmest', () => {
    const printed = (phases: string) => {
      const result = read(studyWith({ duty: `duty: {phases: [${phases}]}` }));
      if (result.kind === 'refused') throw new Error('refused');
      return result.origins.find(({ path }) => path === 'duty.ambient_degC');
    };
    expect(printed('{rest_h: 1}')).toMatchObject({ value: '25', unit: 'degC', source: 'default' });
    expect(printed('{rest_h: 1, ambient_degC: -10.1}, {rest_h: 1}')).toMatchObject({
      value: '-10.1 to 25',
      source: 'study',
    });
  });

  it('are told of slots by position or by string', () => {
    const offsets = (text: string) =>
      studyOf(
        studyWith({
          candidates: `  strings: {wiring: strings, modules: [[A1, A2], [A3, A4]], slot_temperature_offset_K: ${text}}`,
        }),
      ).candidates[0]?.slotOffsetK;
    expect(offsets('[0, 2]')).toEqual([
      [0, 2],
      [0, 2],
    ]);
    expect(offsets('[[0, 2], [1, 3]]')).toEqual([
      [0, 2],
      [1, 3],
    ]);
  });

  it('have activation energies of 20 and 39 kJ/mol by default, and no BMS refuses to charge', () => {
    const { cell, bms } = populationOf(studyOf(studyWithStock([RATED])), 'house');
    expect(cell.activation).toEqual({ resistanceJPerMol: 20_000, leakageJPerMol: 39_000 });
    expect(bms).not.toHaveProperty('chargeRefusal');
    const refusing = studyWithStock([RATED, 'bms: {charge_refusal: {below_degC: 0}}']);
    expect(populationOf(studyOf(refusing), 'house').bms.chargeRefusal).toEqual({ belowK: 273.15, releaseK: 278.15 });
  });

  it('are told of modules written down too', () => {
    const text = studyWith({}).replace(
      '{modules: [A1, A2, A3, A4], rated_Ah: 100}',
      `
    defaults: {capacity_Ah: 100, resistance_activation_kJ_per_mol: 30}
    modules: {A1: {temperature_offset_K: 2}, A2: {}, A3: {}, A4: {}}`,
    );
    const [a1, a2] = explicitOf(studyOf(text), 'house').modules;
    expect(a1).toMatchObject({ activation: { resistanceJPerMol: 30_000 }, temperatureOffsetK: 2 });
    expect(a2?.temperatureOffsetK).toBe(0);
  });
});

describe('the simulation key', () => {
  const plain = studyWithStock([RATED]);
  const steep = studyWithStock([RATED, 'resistance_activation_kJ_per_mol: 30']);

  it('stays the same with other activation energies while every module has 25 degC', () => {
    expect(keyOf(studyOf(steep))).toBe(keyOf(studyOf(plain)));
    expect(keyOf(studyOf(plain.replace('for_h: 4', 'for_h: 4, ambient_degC: 25')))).toBe(keyOf(studyOf(plain)));
  });

  it('does so of modules written down', () => {
    const text = (more: string) =>
      studyWith({}).replace(
        '{modules: [A1, A2, A3, A4], rated_Ah: 100}',
        `
    defaults: {capacity_Ah: 100${more}}
    modules: {A1: {}, A2: {}, A3: {}, A4: {}}`,
      );
    expect(keyOf(studyOf(text(', leakage_activation_kJ_per_mol: 50')))).toBe(keyOf(studyOf(text(''))));
    expect(keyOf(studyOf(text(', temperature_offset_K: 1')))).not.toBe(keyOf(studyOf(text(''))));
  });

  it.each([
    ['an ambient temperature', (text: string) => text.replace('for_h: 4', 'for_h: 4, ambient_degC: 20')],
    ['a warmer slot', (text: string) => text.replace('[A3, A4]]', '[A3, A4]], slot_temperature_offset_K: [0, 1]')],
    ['warmer modules', (text: string) => text.replace(RATED, `${RATED}\n    temperature_offset_K: 1`)],
    ['unlike modules', (text: string) => text.replace(RATED, `${RATED}\n    temperature_offset_K: {module_sd: 1}`)],
  ])('changes with %s, and then with activation energies', (_, change) => {
    expect(keyOf(studyOf(change(plain)))).not.toBe(keyOf(studyOf(plain)));
    expect(keyOf(studyOf(change(steep)))).not.toBe(keyOf(studyOf(change(plain))));
  });
});

describe('the simulation key of modules whose temperature was measured', () => {
  it('changes with activation energies', () => {
    const keyWith = (more: string) =>
      keyOf(
        studyOf(studyWithStock([RATED, 'measured: {file: m.csv}', more]), {
          'm.csv': 'module,temperature_offset_K\nA1,1\nA2,2\nA3,3\nA4,4\n',
        }),
      );
    expect(keyWith('resistance_activation_kJ_per_mol: 30')).not.toBe(keyWith('resistance_activation_kJ_per_mol: 20'));
  });
});

describe('the temperature of modules', () => {
  it('spreads by module with a draw of its own: nothing else that is drawn moves', () => {
    const spread = studyWithStock([RATED, 'temperature_offset_K: {module_sd: 2}']);
    const [plain, unlike] = [studyWithStock([RATED]), spread].map((text) => sampleModules(studyOf(text), 7));
    const offsets = [...(unlike?.values() ?? [])].map((module) => module.temperatureOffsetK);
    expect(new Set(offsets).size).toBe(4);
    for (const [id, module] of plain ?? []) expect({ ...unlike?.get(id), temperatureOffsetK: 0 }).toEqual(module);
  });
});
