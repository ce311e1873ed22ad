import { describe, expect, it } from 'vitest';
import { meanModules } from '../../src/sampling/mean-modules.js';
import { sampleModules } from '../../src/sampling/sample-modules.js';
import { simulationKey } from '../../src/study/simulation-key.js';
import type { ModuleParameters, Study } from '../../src/study/study.js';
import { populationOf, read, studyOf, studyWithStock } from './study-under-test.js';

const RATED = 'rated_Ah: 100';
const refusing = (what: string): string => studyWithStock([RATED, `bms: {charge_refusal: {${what}}}`]);
const keyOf = (study: Study): string => simulationKey(study, study.candidates[0]);
const inFrost = (text: string): string => text.replace('for_h: 4', 'for_h: 4, ambient_degC: -5');
const refusals = (text: string, instance: number) =>
  [...sampleModules(studyOf(text), instance).values()].map(({ bms }) => bms.chargeRefusal);

describe('the temperatures below which a BMS refuses charge and from which it allows it again', () => {
  it('spread between modules, in K', () => {
    const text = refusing('below_degC: {nominal: -1, module: {law: uniform, half_width: 2}}, release_degC: 3');
    const drawn = Array.from({ length: 100 }, (_, k) => refusals(text, k + 1)).flat();
    const below = drawn.map((refusal) => refusal?.belowK ?? Number.NaN);
    // By hand: from -3 to 1 degC, sd 4 / sqrt(12) = 1.1547 K; bands of 5 standard errors of 400 values.
    expect(Math.min(...below)).toBeGreaterThan(270.15);
    expect(Math.max(...below)).toBeLessThan(274.15);
    expect(Math.abs(below.reduce((sum, kelvin) => sum + kelvin, 0) / 400 - 272.15)).toBeLessThan((5 * 1.1547) / 20);
    expect(new Set(below).size).toBe(400);
    for (const refusal of drawn) expect(refusal?.releaseK).toBe(276.15);
  });

  it('have draws of their own: nothing else that is drawn moves', () => {
    const [plain, unlike] = [
      'below_degC: 0',
      'below_degC: {nominal: 0, module_sd: 0.5}, release_degC: {lot_sd: 0.1}',
    ].map((what) => sampleModules(studyOf(refusing(what)), 7));
    const others = ({ bms: { chargeRefusal: _, ...bms }, ...rest }: ModuleParameters) => ({ bms, ...rest });
    for (const [id, module] of plain) expect(others(unlike.get(id) ?? module)).toEqual(others(module));
    const released = [...unlike.values()].map(({ bms }) => bms.chargeRefusal?.releaseK);
    expect(new Set(released).size).toBe(1);
    expect(released[0]).not.toBe(278.15);
  });

  it('are at their means in the twin', () => {
    const modules = meanModules(studyOf(refusing('below_degC: {nominal: 0, module_sd: 0.5}')));
    for (const { bms } of modules.values()) expect(bms.chargeRefusal).toEqual({ belowK: 273.15, releaseK: 278.15 });
  });

  it('are told with their spread', () => {
    const result = read(refusing('below_degC: {nominal: 0, module_sd: 0.5}'));
    if (result.kind === 'refused') throw new Error('refused');
    const told = (path: string) => result.origins.find((one) => one.path === `stock.house.bms.charge_refusal.${path}`);
    expect(told('below_degC')).toMatchObject({ value: '0', unit: 'degC' });
    expect(told('below_degC.module')).toMatchObject({ value: 'sd 0.5 K', source: 'study' });
  });

  it('are left out by null, whatever a stock that it is like says', () => {
    const text = `${refusing('below_degC: {nominal: 0, module_sd: 0.5}')}`.replace(
      'stock:',
      'stock:\n  mild: {like: house, modules: [M1, M2], bms: {charge_refusal: {below_degC: null}}}',
    );
    expect(populationOf(studyOf(text), 'mild').bms).not.toHaveProperty('chargeRefusal');
    const spreadOnly = text.replace('below_degC: null', 'below_degC: {module_sd: 0.9}');
    const { bms, quantities } = populationOf(studyOf(spreadOnly), 'mild');
    expect(bms.chargeRefusal?.belowK).toBe(273.15);
    expect(quantities.refusalBelowK.module).toEqual({ law: 'normal', sd: 0.9 });
  });

  it('may be measured', () => {
    const text = studyWithStock([
      RATED,
      'bms: {charge_refusal: {below_degC: 0}}',
      'measured: {file: m.csv, uncertainty: {bms.charge_refusal.below_degC: 0.1}}',
    ]);
    const csv = 'module,bms.charge_refusal.below_degC\nA1,-1\nA2,0\nA3,1\nA4,2\n';
    const modules = sampleModules(studyOf(text, { 'm.csv': csv }), 1);
    const a1 = (modules.get('A1')?.bms.chargeRefusal?.belowK ?? 0) - 272.15;
    expect(a1).not.toBe(0);
    expect(Math.abs(a1)).toBeLessThan(0.5);
  });
});

describe('the simulation key', () => {
  it('is that of one temperature where it does not spread, or where it is never cold', () => {
    const plain = refusing('below_degC: 0');
    const unspread = refusing('below_degC: {nominal: 0, module_sd: 0}');
    const spread = refusing('below_degC: {nominal: 0, module_sd: 0.5}');
    expect(keyOf(studyOf(inFrost(unspread)))).toBe(keyOf(studyOf(inFrost(plain))));
    expect(keyOf(studyOf(spread))).toBe(keyOf(studyOf(plain)));
    expect(keyOf(studyOf(inFrost(spread)))).not.toBe(keyOf(studyOf(inFrost(plain))));
  });
});
