import { describe, expect, test } from 'vitest';
import { meanModules } from '../../src/sampling/mean-modules.js';
import { sampleModules } from '../../src/sampling/sample-modules.js';
import type { MeasuredModules, ModuleParameters, Study } from '../../src/study/study.js';
import { phiBySeries } from '../mathematics/normal-by-series.js';
import { inventedStock, inventedStudy } from './invented-study.js';
import { BAND, correlation, kolmogorovBand, kolmogorovDistance, mean } from './samples.js';

// Invented measurements.
const OWN: MeasuredModules = {
  quantities: ['capacityAh', 'resistanceOhm', 'arrivalCharge', 'standbyA'],
  uncertaintySd: [0, 0, 0, 0],
  rows: 'of-each-module',
  valuesOf: {
    N1: [94.2, 0.0011, 0.61, 0.0083],
    N2: [96.5, 0.0009, 0.6, 0.0079],
    N3: [90.1, 0.0013, 0.58, 0.0121],
    N4: [95, 0.001, 0.63, 0.008],
  },
};
const ROWS: MeasuredModules = {
  quantities: ['capacityAh', 'standbyA'],
  uncertaintySd: [0, 0],
  rows: 'resampled',
  values: [
    [94, 0.008],
    [96, 0.009],
    [90, 0.013],
    [95, 0.007],
  ],
};

const studyOf = (measured: MeasuredModules): Study => inventedStudy({ stocks: [inventedStock({ measured })] });
const moduleOf = (measured: MeasuredModules, instance: number, id = 'N1'): ModuleParameters => {
  const module = sampleModules(studyOf(measured), instance).get(id);
  if (module === undefined) throw new Error(`no module ${id}`);
  return module;
};

describe('a measured module', () => {
  test('has its measured values in every instance: the capacity of its smallest cell, the mean of its cells otherwise', () => {
    for (const instance of [1, 2, 33]) {
      for (const [id, [capacity, resistance, arrival, standby]] of Object.entries(OWN.valuesOf ?? {})) {
        const module = moduleOf(OWN, instance, id);
        expect(Math.min(...module.capacityAh)).toBeCloseTo(capacity ?? Number.NaN, 11);
        expect(mean(module.resistanceOhm)).toBeCloseTo(resistance ?? Number.NaN, 15);
        expect(mean(module.arrivalCharge)).toBeCloseTo(arrival ?? Number.NaN, 14);
        expect(module.standbyA).toBeCloseTo(standby ?? Number.NaN, 15);
      }
    }
  });

  test('keeps the differences between its cells and everything that was not measured', () => {
    const free = sampleModules(inventedStudy(), 5).get('N1');
    const module = moduleOf(OWN, 5);
    if (free === undefined) throw new Error('no module N1');
    const differences = (values: readonly number[]): number[] => values.map((value) => value - (values[0] ?? 0));
    for (const [place, difference] of differences(module.capacityAh).entries()) {
      expect(difference).toBeCloseTo(differences(free.capacityAh)[place] ?? Number.NaN, 11);
    }
    expect(module.overVoltageV).toBe(free.overVoltageV);
    expect(module.pathResistanceOhm).toBe(free.pathResistanceOhm);
    expect(module.efficiency).toEqual(free.efficiency);
  });

  test('scales its polarisation by its measured resistance', () => {
    // By hand: pairs of 0.4 mOhm belong to the nominal 0.8 mOhm, so 1.1 mOhm has 0.55 mOhm.
    expect(mean(moduleOf(OWN, 5).polarisation[0]?.resistanceOhm ?? [])).toBeCloseTo(0.00055, 15);
  });

  test('with uncertainty spreads normally about its measured value, independent of other modules', () => {
    const uncertain: MeasuredModules = { ...OWN, uncertaintySd: [0.5, 0, 0, 0] };
    const instances = Array.from({ length: 1000 }, (_, k) => k + 1);
    const sampled = instances.map((instance) => sampleModules(studyOf(uncertain), instance));
    const of = (id: string): number[] => sampled.map((modules) => Math.min(...(modules.get(id)?.capacityAh ?? [])));
    expect(kolmogorovDistance(of('N1'), (x) => phiBySeries((x - 94.2) / 0.5))).toBeLessThan(kolmogorovBand(1000));
    expect(Math.abs(correlation(of('N1'), of('N2')))).toBeLessThan(BAND / Math.sqrt(1000));
    expect(sampled[4]?.get('N1')?.standbyA).toBeCloseTo(0.0083, 15);
  });

  test('has its measured values in the twin', () => {
    const twin = meanModules(studyOf(OWN)).get('N3');
    expect(twin?.capacityAh).toEqual(Array(4).fill(expect.closeTo(90.1, 12)));
    expect(twin?.standbyA).toBeCloseTo(0.0121, 15);
    expect(twin?.pathResistanceOhm).toBe(0.0015 + 0.0013);
  });
});

describe('modules resampled from measured rows', () => {
  const rowsOf = (instance: number): number[] =>
    ['N1', 'N2', 'N3', 'N4'].map((id) => {
      const { capacityAh, standbyA } = moduleOf(ROWS, instance, id);
      const row = (ROWS.rows === 'resampled' ? ROWS.values : []).findIndex(
        ([capacity, standby]) =>
          Math.abs(Math.min(...capacityAh) - (capacity ?? 0)) < 1e-9 && Math.abs(standbyA - (standby ?? 0)) < 1e-12,
      );
      return row;
    });

  test('are whole rows, each as likely as any other, with replacement and apart from each other', () => {
    const instances = 800;
    const counts = [0, 0, 0, 0];
    let together = 0;
    for (let instance = 1; instance <= instances; instance++) {
      const rows = rowsOf(instance);
      expect(Math.min(...rows)).toBeGreaterThanOrEqual(0);
      for (const row of rows) counts[row] = (counts[row] ?? 0) + 1;
      if (rows[0] === rows[1]) together++;
    }
    // By hand: a share of 1/4 among n draws has standard error sqrt(3/16/n).
    for (const count of counts) {
      expect(Math.abs(count / (4 * instances) - 0.25)).toBeLessThan(BAND * Math.sqrt(3 / 16 / (4 * instances)));
    }
    expect(Math.abs(together / instances - 0.25)).toBeLessThan(BAND * Math.sqrt(3 / 16 / instances));
  });

  test('have the mean of the rows in the twin', () => {
    // By hand: (94 + 96 + 90 + 95) / 4 = 93.75 Ah and (8 + 9 + 13 + 7) / 4 = 9.25 mA.
    const twin = meanModules(studyOf(ROWS)).get('N2');
    expect(twin?.capacityAh).toEqual(Array(4).fill(expect.closeTo(93.75, 12)));
    expect(twin?.standbyA).toBeCloseTo(0.00925, 15);
  });

  test('leave every other draw as it was', () => {
    const free = sampleModules(inventedStudy(), 7).get('N2');
    const module = moduleOf(ROWS, 7, 'N2');
    expect({ ...module, capacityAh: 0, standbyA: 0, leakageA: 0 }).toEqual({
      ...free,
      capacityAh: 0,
      standbyA: 0,
      leakageA: 0,
    });
  });
});
