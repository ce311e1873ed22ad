import { describe, expect, it } from 'vitest';
import { simulationKey } from '../../src/study/simulation-key.js';
import type { SobolColumn, Study } from '../../src/study/study.js';
import { withoutSpread } from '../../src/study/variants.js';
import { read, repositoryText, studyOf, studyWith } from './study-under-test.js';

const CANDIDATES = `  strings: {wiring: strings, modules: [[A1, A2]]}
  linked: {wiring: cross-linked, modules: [[A1, A2], [A3, A4]]}`;
const base = studyWith({ candidates: CANDIDATES });
const sobol = `${base}plan: sobol\n`;

const keyOf = (study: Study, name = 'strings'): string => {
  const candidate = study.candidates.find(({ key }) => key === name);
  if (candidate === undefined) throw new Error(`no candidate ${name}`);
  return simulationKey(study, candidate);
};
const words = ({ level, module, lot, quantity }: SobolColumn): string => `${module ?? lot ?? level} ${quantity}`;
const columnsOf = (text: string): string[] => (studyOf(text).sobolColumns ?? []).map(words);
const warningsOf = (text: string): readonly string[] => {
  const result = read(text);
  return result.kind === 'read' ? result.warnings.filter((warning) => warning.startsWith('instances')) : ['refused'];
};

describe('the sampling plan', () => {
  it('is that of independent draws unless the study says otherwise', () => {
    expect(studyOf(base)).toMatchObject({ plan: 'independent', instances: 512 });
    expect(studyOf(`${base}plan: latin-hypercube\n`).plan).toBe('latin-hypercube');
    expect(studyOf(base).sobolColumns).toBeUndefined();
  });

  it('leaves a short last block only to independent draws, and says so', () => {
    expect(studyOf(`${base}instances: 100\n`).instances).toBe(100);
    expect(warningsOf(`${base}instances: 100\n`)).toEqual([]);
    for (const plan of ['latin-hypercube', 'sobol']) {
      // By hand: four blocks of 32.
      expect(studyOf(`${base}instances: 100\nplan: ${plan}\n`).instances).toBe(128);
      expect(warningsOf(`${base}instances: 100\nplan: ${plan}\n`)).toEqual([
        `instances: 100 is rounded up to 128, whole blocks of 32, as the plan ${plan} needs`,
      ]);
      expect(warningsOf(`${base}instances: 96\nplan: ${plan}\n`)).toEqual([]);
    }
  });

  it('is part of the simulation key', () => {
    const plans = ['independent', 'latin-hypercube', 'sobol'].map((plan) => keyOf(studyOf(`${base}plan: ${plan}\n`)));
    expect(new Set(plans).size).toBe(3);
    expect(plans[0]).toBe(keyOf(studyOf(base)));
  });
});

describe('columns of Sobol', () => {
  const MODULES = ['A1', 'A2', 'A3', 'A4'];

  it('are given to what spreads: factors of the bank, lots, then modules quantity by quantity', () => {
    const spread = `load_factor: {nominal: 1, bank_sd_percent: 5}`;
    const lots = 'rated_Ah: 100, lots: {spring: [A1, A2], autumn: [A3, A4]}, capacity_Ah: {nominal: 100, lot_sd: 1}';
    const text = sobol.replace('rated_Ah: 100', lots).replace('duty: {', `duty: {${spread}, `);
    expect(columnsOf(text).slice(0, 3)).toEqual(['bank loadFactor', 'spring capacityAh', 'autumn capacityAh']);
    const quantities = ['arrivalCharge', 'capacityAh', 'standbyA', 'resistanceOhm', 'overVoltageV', 'underVoltageV'];
    const ofModules = quantities.flatMap((quantity) => MODULES.map((id) => `${id} ${quantity}`));
    expect(columnsOf(text).slice(3)).toEqual(ofModules);
    expect(columnsOf(sobol)).toEqual(ofModules);
  });

  it('are given to several lots by the names that their draws have', () => {
    const lots = 'rated_Ah: 100, lots: 3, standby_mA: {nominal: 8, lot_sd: 1}';
    const columns = studyOf(sobol.replace('rated_Ah: 100', lots)).sobolColumns ?? [];
    expect(columns.filter(({ level }) => level === 'lot').map(({ lot }) => lot)).toEqual([undefined, '2', '3']);
  });

  it('are 32 at most, for what matters most', () => {
    const many = Array.from({ length: 20 }, (_, k) => `A${k + 1}`);
    const columns = columnsOf(sobol.replace('modules: [A1, A2, A3, A4]', `modules: [${many.join(', ')}]`));
    expect(columns).toHaveLength(32);
    expect(columns.slice(20)).toEqual(many.slice(0, 12).map((id) => `${id} capacityAh`));
  });

  it('stay as they are in a variant with a spread less', () => {
    const study = studyOf(sobol);
    expect(withoutSpread(study, { quantity: 'arrivalCharge' }).sobolColumns).toEqual(study.sobolColumns);
  });

  it('give a candidate another key where its own are moved by other modules, and only there', () => {
    const key = keyOf(studyOf(sobol));
    expect(keyOf(studyOf(`${sobol}title: another\n`))).toBe(key);
    // One more module moves the columns of all quantities but the first.
    expect(keyOf(studyOf(sobol.replace('A3, A4], rated', 'A3, A4, A5], rated')))).not.toBe(key);
    const without = sobol.replace(/ {2}linked.*\n/, '');
    expect(keyOf(studyOf(without))).toBe(key);
  });

  it('of the demo are those of both factors and of six quantities of its four modules', () => {
    const files = { 'demo-week.csv': repositoryText('studies/demo-week.csv') };
    const { sobolColumns } = studyOf(`${repositoryText('studies/demo.yaml')}plan: sobol\n`, files);
    expect(sobolColumns).toHaveLength(2 + 6 * 4);
  });
});
