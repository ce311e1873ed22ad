import { describe, expect, test } from 'vitest';
import { meanBankFactors, sampleBankFactors } from '../../src/sampling/bank-factors.js';
import { meanModules } from '../../src/sampling/mean-modules.js';
import { sampleModules } from '../../src/sampling/sample-modules.js';
import type { Study } from '../../src/study/study.js';
import { inventedStock, inventedStudy, relativeSpread, stockWith, withoutSpread } from './invented-study.js';
import { BAND, mean, modulesOf } from './samples.js';

describe('the modules of the twin', () => {
  test('have every value at its nominal where all deviations have mean 0', () => {
    const modules = meanModules(inventedStudy());
    expect([...modules.keys()]).toEqual(['N1', 'N2', 'N3', 'N4']);
    const four = (value: number): number[] => [value, value, value, value];
    expect(modules.get('N3')).toEqual({
      id: 'N3',
      stock: 'newer',
      temperatureOffsetK: 0,
      ratedAh: 100,
      ocv: 0,
      hysteresisV: 0.0075,
      hysteresisRate: 60,
      capacityAh: four(100),
      resistanceOhm: four(0.0008),
      polarisation: [
        { timeConstantS: 60, resistanceOhm: four(0.0004) },
        { timeConstantS: 1800, resistanceOhm: four(0.0006) },
      ],
      leakageA: four(0.3 / 720),
      efficiency: four(0.9998),
      arrivalCharge: four(0.5),
      pathResistanceOhm: 0.0015 + 0.0013,
      standbyA: 0.008,
      overVoltageV: 3.65,
      overVoltageReleaseV: 3.45,
      underVoltageV: 2.5,
      underVoltageReleaseV: 2.9,
      overCurrentChargeA: 100,
      overCurrentDischargeA: 100,
      bleedA: 0.05,
      bleedStartV: 3.45,
      bms: inventedStock().bms,
    });
  });

  test('are what an instance is when nothing spreads', () => {
    const study = inventedStudy({ stocks: [stockWith(withoutSpread())] });
    expect(sampleModules(study, 3)).toEqual(meanModules(study));
  });

  test('have the mean of a sample, for laws of unequal ends too', () => {
    const study = inventedStudy({
      stocks: [
        stockWith({
          standbyA: { ...relativeSpread(10), module: { law: 'truncated-normal', sd: 0.2, lower: -0.1, upper: 0.6 } },
        }),
      ],
    });
    const sample = modulesOf(study, 1000).map(({ standbyA }) => standbyA);
    const { standbyA = Number.NaN } = meanModules(study).get('N1') ?? {};
    expect(standbyA).toBeGreaterThan(10.5);
    // The sample has standard deviation below 10 x 0.2.
    expect(Math.abs(mean(sample) - standbyA)).toBeLessThan((BAND * 2) / Math.sqrt(sample.length));
  });

  test('are the modules as written where they are explicit', () => {
    const written = [...meanModules(inventedStudy()).values()].slice(0, 2);
    const study = inventedStudy({ stocks: [{ kind: 'explicit', key: 'measured', modules: written }] });
    expect([...meanModules(study).values()]).toEqual(written);
  });
});

describe('bank factors', () => {
  const study = inventedStudy();

  test('have the values they always had', () => {
    // Frozen on 2026-12-01 for seed 4711, instance 5.
    expect(sampleBankFactors(study, 5)).toEqual({
      loadFactor: expect.closeTo(1.018903395565, 11),
      chargeFactor: expect.closeTo(1.051471835064, 11),
    });
  });

  test('do not depend on stocks or candidates, and change with seed and instance', () => {
    const factors = sampleBankFactors(study, 5);
    expect(sampleBankFactors({ ...study, stocks: [] }, 5)).toEqual(factors);
    expect(sampleBankFactors(study, 6)).not.toEqual(factors);
    expect(sampleBankFactors({ ...study, seed: '0' }, 5)).not.toEqual(factors);
    expect(factors.loadFactor).not.toBe(factors.chargeFactor);
  });

  test('follow an absolute spread as they do a relative one, and the twin has both at their means', () => {
    const duty: Study['duty'] = {
      ...study.duty,
      loadFactor: { nominal: 1.2, relative: false, bank: { law: 'uniform', halfWidth: 0.1 } },
      chargeFactor: { nominal: 0.8, relative: true, bank: { law: 'uniform', halfWidth: 0.1 } },
    };
    const sampled = Array.from({ length: 500 }, (_, k) => sampleBankFactors({ ...study, duty }, k + 1));
    const loads = sampled.map(({ loadFactor }) => loadFactor);
    const charges = sampled.map(({ chargeFactor }) => chargeFactor);
    // By hand: ends 1.2 -+ 0.1 and 0.8 (1 -+ 0.1); each fiftieth of a width is hit with certainty but for 0.98^500 = 4e-5.
    expect(Math.min(...loads)).toBeGreaterThan(1.1);
    expect(Math.min(...loads)).toBeLessThan(1.104);
    expect(Math.max(...charges)).toBeLessThan(0.88);
    expect(Math.max(...charges)).toBeGreaterThan(0.8768);
    expect(meanBankFactors({ ...study, duty })).toEqual({ loadFactor: 1.2, chargeFactor: 0.8 });
  });
});
