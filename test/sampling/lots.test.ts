import { describe, expect, test } from 'vitest';
import { sampleModules } from '../../src/sampling/sample-modules.js';
import type { Lots, ModuleParameters } from '../../src/study/study.js';
import { inventedStudy, relativeSpread, stockWith } from './invented-study.js';
import { BAND, correlation } from './samples.js';

const IDS = ['N1', 'N2', 'N3', 'N4'];
const BY_NAME: Lots = { kind: 'by-name', lotOf: { N1: 'spring', N2: 'spring', N3: 'autumn', N4: 'autumn' } };

/** Capacity spreads by lot only, resistance by module and cell. */
const sample = (lots: Lots | undefined, instance: number): ModuleParameters[] => {
  const quantities = {
    capacityAh: relativeSpread(100, 0, 0, 0.02),
    resistanceOhm: relativeSpread(0.0008, 0.03, 0.02),
  };
  const stock = stockWith(quantities, { correlations: [], ...(lots && { lots }) });
  return [...sampleModules(inventedStudy({ stocks: [stock] }), instance).values()];
};
const capacities = (lots: Lots | undefined, instance: number): number[] =>
  sample(lots, instance).map(({ capacityAh }) => capacityAh[0] ?? Number.NaN);

describe('lots by name', () => {
  test('are common to their modules and differ from each other', () => {
    const [n1, n2, n3, n4] = capacities(BY_NAME, 5);
    expect(n1).toBe(n2);
    expect(n3).toBe(n4);
    expect(n1).not.toBe(n3);
  });

  test('are independent of each other', () => {
    const pairs = Array.from({ length: 1000 }, (_, k) => capacities(BY_NAME, k + 1));
    const r = correlation(
      pairs.map(([first]) => first ?? Number.NaN),
      pairs.map(([, , third]) => third ?? Number.NaN),
    );
    expect(Math.abs(r)).toBeLessThan(BAND / Math.sqrt(1000));
  });

  test('leave what is drawn for modules and cells as it was', () => {
    const without = sample(undefined, 5);
    for (const lots of [BY_NAME, { kind: 'by-chance', count: 3 }] as const) {
      for (const [place, { capacityAh, leakageA, ...rest }] of sample(lots, 5).entries()) {
        expect({ ...rest, capacityAh: 0, leakageA: 0 }).toEqual({ ...without[place], capacityAh: 0, leakageA: 0 });
        expect(capacityAh).toHaveLength(leakageA.length);
      }
    }
  });

  test('do not depend on the lots of other modules', () => {
    const other: Lots = { kind: 'by-name', lotOf: { ...BY_NAME.lotOf, N3: 'winter', N4: 'spring' } };
    expect(capacities(other, 5).slice(0, 2)).toEqual(capacities(BY_NAME, 5).slice(0, 2));
    expect(capacities(other, 5)[3]).toBe(capacities(BY_NAME, 5)[0]);
  });
});

describe('lots by chance', () => {
  test('are dealt to each module with equal chances, whatever the others get', () => {
    const lots: Lots = { kind: 'by-chance', count: 3 };
    const instances = 1000;
    let together = 0;
    let first = 0;
    for (let instance = 1; instance <= instances; instance++) {
      const drawn = capacities(lots, instance);
      if (drawn[0] === drawn[1]) together++;
      // The first lot is the one that a stock without lots has.
      if (drawn[2] === capacities(undefined, instance)[2]) first++;
      expect(new Set(drawn).size).toBeLessThanOrEqual(3);
    }
    // By hand: two modules share one of three lots with probability 1/3, standard error sqrt(2/9/n).
    for (const count of [together, first]) {
      expect(Math.abs(count / instances - 1 / 3)).toBeLessThan(BAND * Math.sqrt(2 / 9 / instances));
    }
  });

  test('belong to the module: a further one changes nothing', () => {
    const lots: Lots = { kind: 'by-chance', count: 2 };
    const stock = stockWith({ capacityAh: relativeSpread(100, 0, 0, 0.02) }, { lots });
    const more = sampleModules(inventedStudy({ stocks: [{ ...stock, moduleIds: ['N0', ...IDS] }] }), 9);
    for (const [id, module] of sampleModules(inventedStudy({ stocks: [stock] }), 9)) {
      expect(more.get(id)).toEqual(module);
    }
  });
});
