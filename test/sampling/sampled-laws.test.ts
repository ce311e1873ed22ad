import { describe, expect, test } from 'vitest';
import { sampleBankFactors } from '../../src/sampling/bank-factors.js';
import type { Correlation, Law, Spread, Study } from '../../src/study/study.js';
import { phiBySeries } from '../mathematics/normal-by-series.js';
import { inventedStudy, relativeSpread, stockWith, withoutSpread } from './invented-study.js';
import { BAND, correlation, kolmogorovBand, kolmogorovDistance, mean, modulesOf, ranks, sd } from './samples.js';

// Everything that follows goes through the whole sampler. The seed is fixed; bands are those of samples.ts.

const FIXED: Law = { law: 'fixed' };
const INSTANCES = 1000;

/** A study in which nothing spreads but what is given. */
const studyOf = (
  spreads: Partial<Record<'capacityAh' | 'resistanceOhm' | 'efficiency' | 'standbyA', Spread>>,
  cellsInSeries = 4,
  correlations: Correlation[] = [],
): Study => inventedStudy({ stocks: [stockWith({ ...withoutSpread(), ...spreads }, { cellsInSeries, correlations })] });

describe('a law', () => {
  const standby = (law: Law): number[] =>
    modulesOf(
      studyOf({ standbyA: { nominal: 10, relative: false, lot: FIXED, module: law, cell: FIXED } }, 1),
      INSTANCES,
    ).map((module) => module.standbyA);
  const between = (x: number, from: number, to: number): number =>
    (phiBySeries(x) - phiBySeries(from)) / (phiBySeries(to) - phiBySeries(from));

  // ln F has standard deviation s = sqrt(ln(1 + 0.3^2)) and middle -s^2/2 (mean of F: 1); the cut moves it by 1e-6.
  const s = Math.sqrt(Math.log(1.09));
  test.each<[Law['law'], Law, (x: number) => number]>([
    ['normal', { law: 'normal', sd: 2 }, (x) => between((x - 10) / 2, -5, 5)],
    [
      'truncated-normal',
      { law: 'truncated-normal', sd: 2, lower: -3, upper: 1 },
      (x) => between((x - 10) / 2, -1.5, 0.5),
    ],
    ['lognormal', { law: 'lognormal', sd: 3 }, (x) => phiBySeries((Math.log(x / 10) + (s * s) / 2) / s)],
    ['uniform', { law: 'uniform', halfWidth: 4 }, (x) => (x - 6) / 8],
    // Peak at the lower end: F = 1 - (1 - t)^2 with t from 0 to 1 over 6, mean at a third, 10.
    ['triangular', { law: 'triangular', halfWidth: 3, peakFraction: 0 }, (x) => 1 - (1 - (x - 8) / 6) ** 2],
    // Exponential with its cut at 6, whose mean then is (1 - 7 e^-6) / (1 - e^-6) = 0.985091.
    ['weibull', { law: 'weibull', shape: 1, sd: 2 }, (x) => -Math.expm1(-((x - 10) / 2 + 0.985091)) / -Math.expm1(-6)],
    // Beta 1, 3: F = 1 - (1 - t)^3, mean at a quarter.
    ['beta', { law: 'beta', alpha: 1, beta: 3, halfWidth: 4 }, (x) => 1 - (1 - (x - 8) / 8) ** 3],
    // Three quarters within +-1 of 9, a quarter within +-2 of 13: mean 10 as it stands.
    [
      'mixture',
      {
        law: 'mixture',
        factor: 1,
        parts: [
          { weight: 0.75, at: 0, law: { law: 'uniform', halfWidth: 1 } },
          { weight: 0.25, at: 4, law: { law: 'uniform', halfWidth: 2 } },
        ],
      },
      (x) => (x < 10.5 ? 0.75 * Math.min(1, (x - 8) / 2) : 0.75) + 0.25 * Math.max(0, (x - 11) / 4),
    ],
  ])('%s gives samples of its distribution', (_, law, cdf) => {
    const sample = standby(law);
    expect(kolmogorovDistance(sample, cdf)).toBeLessThan(kolmogorovBand(sample.length));
  });

  test('of lot, module and cell adds up over the levels', () => {
    const modules = modulesOf(studyOf({ capacityAh: relativeSpread(100, 0.02, 0.01, 0.03) }, 2), INSTANCES);
    const first = modules.filter(({ id }) => id === 'N1').map(({ capacityAh }) => capacityAh[0] ?? Number.NaN);
    // By hand: variances add, 0.03^2 + 0.02^2 + 0.01^2; a standard deviation has standard error sd / sqrt(2 n).
    const expected = 100 * Math.sqrt(0.0014);
    expect(Math.abs(sd(first) / expected - 1)).toBeLessThan(BAND / Math.sqrt(2 * INSTANCES));
    // Modules of an instance share the lot: correlation 9 / 14.
    const second = modules.filter(({ id }) => id === 'N2').map(({ capacityAh }) => capacityAh[0] ?? Number.NaN);
    const spread = (1 - (9 / 14) ** 2) / Math.sqrt(INSTANCES);
    expect(Math.abs(correlation(first, second) - 9 / 14)).toBeLessThan(BAND * spread);
    // Cells of a module share lot and module: correlation 13 / 14.
    const next = modules.filter(({ id }) => id === 'N1').map(({ capacityAh }) => capacityAh[1] ?? Number.NaN);
    expect(Math.abs(correlation(first, next) - 13 / 14)).toBeLessThan(
      (BAND * (1 - (13 / 14) ** 2)) / Math.sqrt(INSTANCES),
    );
  });
});

describe('smallest and largest cell of a module', () => {
  // Normal order statistics: Tippett 1925, Biometrika 17, 364; Teichroew 1956, Ann. Math. Stat. 27, 410; Harter 1961,
  // Biometrika 48, 151: mean of the largest, standard deviation of the smallest, mean of the range of n.
  test.each([
    { n: 2, largest: 0.5641895835, sdOfSmallest: 0.82564527, range: 1.12837917 },
    { n: 3, largest: 0.8462843753, sdOfSmallest: 0.7479754, range: 1.69256875 },
    { n: 4, largest: 1.029375373, sdOfSmallest: 0.7012241, range: 2.05875075 },
    { n: 8, largest: 1.423600306, sdOfSmallest: 0.61065305, range: 2.84720061 },
    { n: 16, largest: 1.7659913931, sdOfSmallest: 0.54314805, range: 3.53198279 },
  ])('of $n cells are those of normal order statistics', ({ n, largest, sdOfSmallest, range }) => {
    const study = studyOf({ capacityAh: relativeSpread(100, 0, 0.01) }, n);
    const modules = modulesOf(study, 500).map(({ capacityAh }) => capacityAh);
    const smallest = modules.map((cells) => Math.min(...cells));
    const count = modules.length;
    // The cut at 5 sd moves none of these by more than 1e-4 of the cells' standard deviation, which is 1 Ah here.
    expect(Math.abs(mean(smallest) - (100 - largest))).toBeLessThan((BAND * sdOfSmallest) / Math.sqrt(count));
    // A sample's standard deviation s has standard error s sqrt((kurtosis - 1) / 4 n); kurtosis of the smallest < 3.6.
    expect(Math.abs(sd(smallest) / sdOfSmallest - 1)).toBeLessThan(BAND * Math.sqrt(2.6 / (4 * count)));
    const ranges = modules.map((cells) => Math.max(...cells) - Math.min(...cells));
    expect(Math.abs(mean(ranges) - range)).toBeLessThan((BAND * sd(ranges)) / Math.sqrt(count));
  });

  test('make a module of four cells with CoV 1 % 0.989706 of nominal on average, sd 0.007012', () => {
    // By hand: 1 - 1.029375 x 0.01 and 0.701224 x 0.01.
    const sample = modulesOf(studyOf({ capacityAh: relativeSpread(1, 0, 0.01) }), INSTANCES).map(({ capacityAh }) =>
      Math.min(...capacityAh),
    );
    expect(Math.abs(mean(sample) - 0.989706)).toBeLessThan((BAND * 0.007012) / Math.sqrt(sample.length));
    expect(Math.abs(sd(sample) / 0.007012 - 1)).toBeLessThan(BAND * Math.sqrt(2.6 / (4 * sample.length)));
  });
});

describe('a correlation', () => {
  const pairOf = (rho: number, law: Law, level: 'module' | 'cell' = 'module'): { one: number[]; other: number[] } => {
    const spread = { nominal: 100, relative: true, lot: FIXED, module: FIXED, cell: FIXED, [level]: law };
    const modules = modulesOf(
      studyOf({ capacityAh: spread, resistanceOhm: spread }, 1, [{ level, of: ['resistanceOhm', 'capacityAh'], rho }]),
      INSTANCES,
    );
    return {
      one: modules.map(({ capacityAh }) => capacityAh[0] ?? Number.NaN),
      other: modules.map(({ resistanceOhm }) => resistanceOhm[0] ?? Number.NaN),
    };
  };

  test.each([-0.7, -0.3, 0.5, 0.9])('of %d between normals is found in the sample, and both stay normal', (rho) => {
    for (const level of ['module', 'cell'] as const) {
      const { one, other } = pairOf(rho, { law: 'normal', sd: 0.01 }, level);
      // Fisher's z = artanh r has standard error 1 / sqrt(n - 3).
      const distance = Math.abs(Math.atanh(correlation(one, other)) - Math.atanh(rho));
      expect(distance).toBeLessThan(BAND / Math.sqrt(one.length - 3));
      for (const values of [one, other]) {
        expect(kolmogorovDistance(values, (x) => phiBySeries(x - 100))).toBeLessThan(kolmogorovBand(values.length));
      }
    }
  });

  test('between lognormals has the rank correlation of the Gaussian copula', () => {
    // Kruskal 1958, J. Am. Stat. Assoc. 53, 814: Spearman's rho = (6 / pi) arcsin(rho / 2), whatever the laws.
    const { one, other } = pairOf(-0.7, { law: 'lognormal', sd: 0.3 });
    const spearman = correlation(ranks(one), ranks(other));
    const distance = Math.abs(Math.atanh(spearman) - Math.atanh((6 / Math.PI) * Math.asin(-0.35)));
    // Standard error of artanh of a rank correlation: 1.03 / sqrt(n - 3) (Fieller, Hartley, Pearson 1957, Biometrika 44).
    expect(distance).toBeLessThan((BAND * 1.03) / Math.sqrt(one.length - 3));
  });

  test.each<[Law['law'], Law]>([
    ['triangular', { law: 'triangular', halfWidth: 0.03, peakFraction: 0.2 }],
    ['weibull', { law: 'weibull', shape: 1.5, sd: 0.01 }],
    ['beta', { law: 'beta', alpha: 2, beta: 4, halfWidth: 0.03 }],
    [
      'mixture',
      {
        law: 'mixture',
        factor: 1,
        parts: [
          { weight: 0.9, at: 0, law: { law: 'normal', sd: 0.01 } },
          { weight: 0.1, at: -0.1, law: { law: 'normal', sd: 0.02 } },
        ],
      },
    ],
  ])('between %s laws has it too', (_, law) => {
    const { one, other } = pairOf(0.6, law);
    const spearman = correlation(ranks(one), ranks(other));
    const distance = Math.abs(Math.atanh(spearman) - Math.atanh((6 / Math.PI) * Math.asin(0.3)));
    expect(distance).toBeLessThan((BAND * 1.03) / Math.sqrt(one.length - 3));
  });

  test('of 1 and -1 binds two quantities entirely', () => {
    const same = pairOf(1, { law: 'normal', sd: 0.01 });
    same.one.forEach((value, k) => {
      expect(same.other[k]).toBeCloseTo(value, 9);
    });
    const opposite = pairOf(-1, { law: 'normal', sd: 0.01 });
    opposite.one.forEach((value, k) => {
      expect(opposite.other[k]).toBeCloseTo(200 - value, 9);
    });
  });

  test('holds at its own level only, and for three quantities together', () => {
    const spread = relativeSpread(100, 0.01, 0.01);
    const modules = modulesOf(
      studyOf({ capacityAh: spread, resistanceOhm: spread, efficiency: spread }, 2, [
        { level: 'module', of: ['capacityAh', 'resistanceOhm'], rho: -0.7 },
        { level: 'module', of: ['efficiency', 'resistanceOhm'], rho: 0.4 },
      ]),
      INSTANCES,
    );
    // The difference of two cells holds no module deviation, their sum both.
    const parts = (name: 'capacityAh' | 'resistanceOhm' | 'efficiency', sign: 1 | -1): number[] =>
      modules.map((module) => (module[name][0] ?? Number.NaN) + sign * (module[name][1] ?? Number.NaN));
    const band = BAND / Math.sqrt(modules.length - 3);
    const artanhOf = (one: number[], other: number[]): number => Math.atanh(correlation(one, other));
    expect(Math.abs(artanhOf(parts('capacityAh', -1), parts('resistanceOhm', -1)))).toBeLessThan(band);
    // By hand: a sum has variance 4 + 2 (module, cells), so 2/3 of the correlation is left.
    const left = (rho: number): number => Math.atanh((2 / 3) * rho);
    expect(Math.abs(artanhOf(parts('capacityAh', 1), parts('resistanceOhm', 1)) - left(-0.7))).toBeLessThan(band);
    expect(Math.abs(artanhOf(parts('efficiency', 1), parts('resistanceOhm', 1)) - left(0.4))).toBeLessThan(band);
    expect(Math.abs(artanhOf(parts('efficiency', 1), parts('capacityAh', 1)))).toBeLessThan(band);
  });
});

describe('unrelated things are uncorrelated', () => {
  const study = inventedStudy();
  const modules = modulesOf(study, INSTANCES);
  const band = BAND / Math.sqrt(INSTANCES);
  const sample = (id: string, value: (module: (typeof modules)[number]) => number | undefined): number[] =>
    modules.filter((module) => module.id === id).map((module) => value(module) ?? Number.NaN);

  test('consecutive instances', () => {
    for (const value of [
      (module: (typeof modules)[number]) => module.capacityAh[2],
      (module: (typeof modules)[number]) => module.leakageA[0],
      (module: (typeof modules)[number]) => module.standbyA,
      (module: (typeof modules)[number]) => module.overVoltageV,
    ]) {
      const values = sample('N1', value);
      expect(Math.abs(correlation(values.slice(0, -1), values.slice(1)))).toBeLessThan(band);
    }
    const factors = Array.from({ length: INSTANCES }, (_, k) => sampleBankFactors(study, k + 1));
    const loads = factors.map(({ loadFactor }) => loadFactor);
    expect(Math.abs(correlation(loads.slice(0, -1), loads.slice(1)))).toBeLessThan(band);
    const charges = factors.map(({ chargeFactor }) => chargeFactor);
    expect(Math.abs(correlation(loads, charges))).toBeLessThan(band);
  });

  test('modules, cells and quantities', () => {
    const capacity = sample('N1', (module) => module.capacityAh[0]);
    expect(
      Math.abs(
        correlation(
          capacity,
          sample('N2', (module) => module.capacityAh[0]),
        ),
      ),
    ).toBeLessThan(band);
    expect(
      Math.abs(
        correlation(
          capacity,
          sample('N1', (module) => module.standbyA),
        ),
      ),
    ).toBeLessThan(band);
    expect(
      Math.abs(
        correlation(
          capacity,
          sample('N1', (module) => module.arrivalCharge[0]),
        ),
      ),
    ).toBeLessThan(band);
    const leakage = (cell: number): number[] =>
      sample('N1', (module) => (module.leakageA[cell] ?? 0) / (module.capacityAh[cell] ?? 0));
    expect(Math.abs(correlation(leakage(0), leakage(1)))).toBeLessThan(band);
  });
});
