import { describe, expect, test } from 'vitest';
import { sampleModules } from '../../src/sampling/sample-modules.js';
import type { ModuleParameters, Study } from '../../src/study/study.js';
import { inventedStock, inventedStudy, relativeSpread, stockWith } from './invented-study.js';

const moduleOf = (study: Study, id: string, instance = 5): ModuleParameters => {
  const module = sampleModules(study, instance).get(id);
  if (module === undefined) throw new Error(`no module ${id}`);
  return module;
};

const study = inventedStudy();

describe('what is drawn', () => {
  test('has the values it always had', () => {
    // Frozen on 2026-12-01 for seed 4711, instance 5; to 11 digits, because Math.exp and Math.log differ in the last ones.
    const near = (...values: number[]) => values.map((value) => expect.closeTo(value, 10));
    const { capacityAh, resistanceOhm, standbyA, arrivalCharge, overVoltageV } = moduleOf(study, 'N1');
    expect(capacityAh).toEqual(near(100.45137883291, 100.15008556923, 100.42966844017, 100.2714120958));
    expect(resistanceOhm.map((ohm) => 1000 * ohm)).toEqual(
      near(0.82906247898, 0.82440672442, 0.80097651997, 0.8411298096),
    );
    expect(arrivalCharge).toEqual(near(0.45050641702, 0.4484718950322, 0.45101723853, 0.44955919534));
    expect([1000 * standbyA, overVoltageV]).toEqual(near(6.64999660694, 3.64698354389));
  });

  test('is the same whichever instance was asked for before, and for any count of instances and cycles', () => {
    const modules = sampleModules(study, 40);
    sampleModules(study, 7);
    expect(sampleModules(study, 40)).toEqual(modules);
    expect(sampleModules({ ...study, instances: 40, cycles: 3, confidenceFraction: 0.9 }, 40)).toEqual(modules);
  });

  test('differs between seeds, seed 0 being one of them, and between instances', () => {
    const draws = [
      moduleOf(study, 'N1'),
      moduleOf({ ...study, seed: '0' }, 'N1'),
      moduleOf({ ...study, seed: '1' }, 'N1'),
      moduleOf(study, 'N1', 6),
      moduleOf(study, 'N1', 37),
      moduleOf(study, 'N2'),
    ];
    expect(new Set(draws.map(({ capacityAh }) => capacityAh[0])).size).toBe(draws.length);
    expect(moduleOf({ ...study, seed: '0' }, 'N1')).toEqual(moduleOf({ ...study, seed: '0' }, 'N1'));
  });

  test('belongs to block and index: the first instance of a block does not depend on what its size was before', () => {
    // Instance 33 is the first of block 2 of 32, instance 65 the first of block 2 of 64.
    expect(sampleModules({ ...study, blockSize: 64 }, 65)).toEqual(sampleModules(study, 33));
    expect(sampleModules({ ...study, blockSize: 64 }, 33)).not.toEqual(sampleModules(study, 33));
  });

  test('has a value of its own for every module, cell and quantity', () => {
    const values = [...sampleModules(study, 5).values()].flatMap((module) => [
      ...module.capacityAh,
      ...module.resistanceOhm,
      ...module.leakageA,
      ...module.arrivalCharge,
      module.standbyA,
      module.pathResistanceOhm,
      module.overVoltageV,
      module.underVoltageV,
    ]);
    expect(new Set(values).size).toBe(4 * (4 * 4 + 4));
  });

  test('is refused for what is no instance', () => {
    for (const instance of [0, 1.5, Number.NaN]) expect(() => sampleModules(study, instance)).toThrow(RangeError);
  });
});

describe('what does not change the other draws', () => {
  const modules = sampleModules(study, 5);

  test('candidates', () => {
    const candidate: Study['candidates'][number] = {
      key: 'strings',
      title: 'Invented',
      wiring: 'strings',
      strings: [['N1', 'N2']],
      leads: [{ negativeOhm: 0, betweenOhm: 0, positiveOhm: 0 }],
      linkOhm: 0,
      charger: {
        limitA: 60,
        absorptionV: 28.4,
        tailA: 4,
        tailHoldS: 120,
        absorptionS: null,
        floatV: null,
        restart: 'each-cycle',
        restartV: 26.4,
      },
      load: { disconnectV: null, disconnectDelayS: 10, reconnectV: 26 },
      commissioning: 'as-received',
      bleed: { rule: 'each', currentA: 0.2 },
    };
    expect(sampleModules({ ...study, candidates: [candidate] }, 5)).toEqual(modules);
  });

  test('a further module, a further stock, and their order', () => {
    const longer = inventedStock({ moduleIds: ['N5', 'N4', 'N3', 'N2', 'N1'] });
    const other = inventedStock({ key: 'older', moduleIds: ['O1'] });
    const sampled = sampleModules({ ...study, stocks: [other, longer] }, 5);
    expect([...sampled.keys()]).toEqual(['O1', 'N5', 'N4', 'N3', 'N2', 'N1']);
    for (const [id, module] of modules) expect(sampled.get(id)).toEqual(module);
  });

  test('further cells', () => {
    const packs = sampleModules({ ...study, stocks: [inventedStock({ cellsInSeries: 8 })] }, 5);
    for (const [id, module] of modules) {
      expect(packs.get(id)?.capacityAh.slice(0, 4)).toEqual(module.capacityAh);
      expect(packs.get(id)?.capacityAh).toHaveLength(8);
    }
  });

  test('a further spread outside every correlation', () => {
    const more = stockWith({ bleedA: relativeSpread(0.05, 0.1), overCurrentChargeA: relativeSpread(100, 0.02) });
    for (const [id, module] of sampleModules({ ...study, stocks: [more] }, 5)) {
      const { bleedA, overCurrentChargeA } = module;
      expect(bleedA).not.toBe(0.05);
      expect(module).toEqual({ ...modules.get(id), bleedA, overCurrentChargeA });
    }
  });

  test('a spread taken away, even from one side of a correlation', () => {
    const { lot, relative } = relativeSpread(100);
    const fixed = stockWith({ capacityAh: { nominal: 100, relative, lot, module: lot, cell: lot } });
    for (const [id, module] of sampleModules({ ...study, stocks: [fixed] }, 5)) {
      expect(module.capacityAh).toEqual([100, 100, 100, 100]);
      expect(module.resistanceOhm).toEqual(modules.get(id)?.resistanceOhm);
      expect(module.standbyA).toBe(modules.get(id)?.standbyA);
    }
  });

  test('a correlation between others; the first of the pair in the registry keeps its own draw', () => {
    const more = inventedStock({
      correlations: [
        ...inventedStock().correlations,
        { level: 'module', of: ['underVoltageV', 'overVoltageV'], rho: 0.5 },
      ],
    });
    for (const [id, module] of sampleModules({ ...study, stocks: [more] }, 5)) {
      const { underVoltageV, overVoltageV } = module;
      expect(module).toEqual({ ...modules.get(id), underVoltageV, overVoltageV });
      expect(overVoltageV).toBeCloseTo(modules.get(id)?.overVoltageV ?? Number.NaN, 12);
      expect(underVoltageV).not.toBe(modules.get(id)?.underVoltageV);
    }
  });

  test('a nominal value: the deviation stays', () => {
    const heavier = stockWith({ standbyA: { ...inventedStock().quantities.standbyA, nominal: 0.016 } });
    for (const [id, module] of sampleModules({ ...study, stocks: [heavier] }, 5)) {
      expect(module.standbyA).toBeCloseTo(2 * (modules.get(id)?.standbyA ?? Number.NaN), 14);
    }
  });
});

describe('a lot', () => {
  const lotOnly = stockWith({ capacityAh: relativeSpread(100, 0, 0, 0.02), resistanceOhm: relativeSpread(0.0008) });

  test('is common to all modules and cells of a stock in an instance, and new in the next', () => {
    const capacities = (instance: number): Set<number> =>
      new Set([...sampleModules({ ...study, stocks: [lotOnly] }, instance).values()].flatMap((m) => m.capacityAh));
    expect(capacities(5).size).toBe(1);
    expect(capacities(6).size).toBe(1);
    expect(capacities(5)).not.toEqual(capacities(6));
  });

  test('is its own for each stock', () => {
    const twice = [lotOnly, { ...lotOnly, key: 'older', moduleIds: ['O1'] }];
    const sampled = sampleModules({ ...study, stocks: twice }, 5);
    expect(sampled.get('O1')?.capacityAh[0]).not.toBe(sampled.get('N1')?.capacityAh[0]);
  });
});

test('explicit modules pass through as they were written, beside populations', () => {
  const { capacityAh: _, ...rest } = moduleOf(study, 'N1');
  const written: ModuleParameters = { ...rest, id: 'E1', stock: 'measured', capacityAh: [99, 98, 97, 96] };
  const sampled = sampleModules(
    { ...study, stocks: [{ kind: 'explicit', key: 'measured', modules: [written] }, ...study.stocks] },
    5,
  );
  expect(sampled.get('E1')).toBe(written);
  expect(sampled.get('N1')).toEqual(moduleOf(study, 'N1'));
});

test('stocks and modules whose keys run together are drawn apart', () => {
  const stocks = [
    inventedStock({ key: 'ab', moduleIds: ['c'] }),
    inventedStock({ key: 'a', moduleIds: ['bc'] }),
    inventedStock({ key: 'abc', moduleIds: ['_'] }),
  ];
  const capacities = [...sampleModules({ ...study, stocks }, 5).values()].map((module) => module.capacityAh[0]);
  expect(new Set(capacities).size).toBe(3);
});

test('contradicting correlations are refused', () => {
  const stock = inventedStock({
    correlations: [
      { level: 'cell', of: ['capacityAh', 'resistanceOhm'], rho: 0.9 },
      { level: 'cell', of: ['capacityAh', 'efficiency'], rho: 0.9 },
      { level: 'cell', of: ['resistanceOhm', 'efficiency'], rho: -0.9 },
    ],
  });
  expect(() => sampleModules({ ...study, stocks: [stock] }, 1)).toThrow(RangeError);
});
