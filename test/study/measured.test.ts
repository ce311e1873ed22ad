import { describe, expect, it } from 'vitest';
import { simulationKey } from '../../src/study/simulation-key.js';
import type { Study } from '../../src/study/study.js';
import { populationOf, read, studyOf, studyWithStock } from './study-under-test.js';

// Invented measurements.
const FILES = {
  'lab.csv':
    'module,arrival_charge_percent,capacity_Ah,bms.over_voltage.cell_V\n"A2",60,96.5,3.62\nA1,61,95,3.66\nA9,1,2,3\nA4,58,97,3.6\nA3,62,94,3.64\n',
};
const MEASURED = ['rated_Ah: 100', 'measured: {file: lab.csv, uncertainty: {arrival_charge_percent: 1}}'];

function keyOf(study: Study): string {
  const [candidate] = study.candidates;
  if (candidate === undefined) throw new Error('no candidate');
  return simulationKey(study, candidate);
}

describe('measured modules', () => {
  const stock = populationOf(studyOf(studyWithStock(MEASURED), FILES), 'house');

  it('have the row with their name, in SI and the order of the quantities', () => {
    expect(stock.measured).toEqual({
      quantities: ['capacityAh', 'arrivalCharge', 'overVoltageV'],
      uncertaintySd: [0, 0.01, 0],
      rows: 'of-each-module',
      valuesOf: { A1: [95, 0.61, 3.66], A2: [96.5, 0.6, 3.62], A3: [94, 0.62, 3.64], A4: [97, 0.58, 3.6] },
    });
  });

  it('have everything else from their stock', () => {
    const plain = populationOf(studyOf(studyWithStock(['rated_Ah: 100'])), 'house');
    const { measured: _, ...rest } = stock;
    expect(rest).toEqual(plain);
  });

  it('may be rows drawn by chance, for which names are not needed', () => {
    const study = studyOf(studyWithStock(['rated_Ah: 100', 'measured: {file: rows.csv, rows: resampled}']), {
      'rows.csv': 'standby_mA\n8\n9\n',
    });
    expect(populationOf(study, 'house').measured).toEqual({
      quantities: ['standbyA'],
      uncertaintySd: [0],
      rows: 'resampled',
      values: [[0.008], [0.009]],
    });
  });

  it('may have what the stock has none of', () => {
    // A percentage of a nominal value of 0 is no spread, and no unit for a measured value either.
    const study = studyOf(
      studyWithStock([
        'rated_Ah: 100',
        'leakage_percent_per_month: {nominal: 0, cell: {law: normal, sd_percent: 10}}',
        'measured: {file: leaks.csv}',
      ]),
      { 'leaks.csv': 'module,leakage_percent_per_month\nA1,1\nA2,2\nA3,0\nA4,3\n' },
    );
    const { quantities } = populationOf(study, 'house');
    expect(quantities.leakagePerMonth).toMatchObject({ nominal: 0, relative: false });
    const { rows: _, ...measured } = populationOf(study, 'house').measured ?? { rows: null };
    expect(measured).toMatchObject({ valuesOf: { A2: [0.02] } });
  });

  it('are told by check in place of what they set aside, and correlations that have no effect are warned of', () => {
    const result = read(studyWithStock(MEASURED), FILES);
    if (result.kind === 'refused') throw new Error('refused');
    const at = (path: string) => result.origins.filter((origin) => origin.path === path);
    expect(at('stock.house.capacity_Ah')).toEqual([
      { path: 'stock.house.capacity_Ah', value: '94 to 97 (lab.csv)', unit: 'Ah', source: 'study' },
    ]);
    expect(at('stock.house.arrival_charge_percent')[0]?.value).toBe('58 to 62, uncertain by sd 1 (lab.csv)');
    expect(at('stock.house.capacity_Ah.module')).toEqual([]);
    expect(at('stock.house.capacity_Ah.cell')).toHaveLength(1);
    // The grade brings a correlation along too; only one that the author wrote is worth a word.
    const split =
      'stock house: a correlation of capacity_Ah and cell_resistance_mOhm at level module has no effect, since not both are drawn';
    expect(result.warnings).not.toContain(split);
    const own = 'correlation: [{level: module, of: [capacity_Ah, cell_resistance_mOhm], rho: -0.2}]';
    const written = read(studyWithStock([...MEASURED, own]), FILES);
    expect(written.kind === 'read' ? written.warnings : []).toContain(split);
  });

  it('are what the rules of a bank go by', () => {
    // By hand: 28.8 V lies below 8 x 3.65 V and above 4 x (3.6 + 3.59) V = 28.76 V.
    const charger = (high: string): readonly string[] => {
      const text = studyWithStock(MEASURED).replace(
        '[[A1, A2], [A3, A4]]',
        '[[A1, A2], [A3, A4]], charger: {absorption_V: 28.8}',
      );
      const result = read(text, { 'lab.csv': FILES['lab.csv'].replace('3.64', high) });
      return result.kind === 'read'
        ? result.warnings.filter((warning) => /^absorption.*lies above/.test(warning))
        : ['refused'];
    };
    expect(charger('3.64')).toEqual([]);
    expect(charger('3.59')).toHaveLength(1);
  });

  it('change the key of a candidate that uses them, and of no other', () => {
    const text = studyWithStock(MEASURED).replace('[[A1, A2], [A3, A4]]', '[[A1, A2]]');
    const key = keyOf(studyOf(text, FILES));
    const withValue = (from: string, to: string): string =>
      keyOf(studyOf(text, { 'lab.csv': FILES['lab.csv'].replace(from, to) }));
    expect(withValue('96.5', '96.4')).not.toBe(key);
    expect(withValue('97', '97.1')).toBe(key);
  });
});

describe('lots', () => {
  const lotsOf = (line: string) => populationOf(studyOf(studyWithStock(['rated_Ah: 100', line])), 'house').lots;

  it('may be so many, or the modules of each by its name', () => {
    expect(lotsOf('lots: 3')).toEqual({ kind: 'by-chance', count: 3 });
    expect(lotsOf('lots: {spring: [A1, A3], autumn: [A4, A2]}')).toEqual({
      kind: 'by-name',
      lotOf: { A1: 'spring', A3: 'spring', A4: 'autumn', A2: 'autumn' },
    });
  });

  it('are one unless the study says otherwise, with the key it had before there were lots', () => {
    const plain = studyOf(studyWithStock(['rated_Ah: 100']));
    expect(populationOf(plain, 'house')).not.toHaveProperty('lots');
    expect(populationOf(plain, 'house')).not.toHaveProperty('measured');
    expect(keyOf(studyOf(studyWithStock(['rated_Ah: 100', 'lots: 1'])))).toBe(keyOf(plain));
    expect(keyOf(studyOf(studyWithStock(['rated_Ah: 100', 'lots: 2'])))).not.toBe(keyOf(plain));
  });

  it('are taken over by a stock that is like another as a number only', () => {
    const barn = '  barn: {like: house, modules: [B1]}\n';
    const lotsOfBarn = (line: string) =>
      populationOf(studyOf(studyWithStock(['rated_Ah: 100', line], barn)), 'barn').lots;
    expect(lotsOfBarn('lots: 3')).toEqual({ kind: 'by-chance', count: 3 });
    expect(lotsOfBarn('lots: {spring: [A1, A3], autumn: [A4, A2]}')).toBeUndefined();
  });

  it('of modules that a candidate does not use leave its key as it is', () => {
    const text = (lots: string): string =>
      studyWithStock(['rated_Ah: 100', lots]).replace('[[A1, A2], [A3, A4]]', '[[A1, A2]]');
    const key = keyOf(studyOf(text('lots: {spring: [A1, A2], autumn: [A3, A4]}')));
    expect(keyOf(studyOf(text('lots: {spring: [A1, A2, A3, A4]}')))).toBe(key);
    expect(keyOf(studyOf(text('lots: {spring: [A1, A3, A4], autumn: [A2]}')))).not.toBe(key);
  });
});
