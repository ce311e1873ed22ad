import { describe, expect, it } from 'vitest';
import { meanModules } from '../../src/sampling/mean-modules.js';
import { sampleModules } from '../../src/sampling/sample-modules.js';
import type { ModuleParameters, PopulationStock, Study } from '../../src/study/study.js';
import { inventedStock, inventedStudy, relativeSpread } from './invented-study.js';

const CELL_SD = 0.004;

/** Modules N1 and N2 of four cells, and a pack P1 of eight; both spread by module and cell. Invented. */
function studyWithPack(pack: Partial<PopulationStock> = {}): Study {
  const newer = inventedStock();
  const cells = ['N1', 'N2'].flatMap((module) => [1, 2, 3, 4].map((cell) => ({ stock: 'newer', module, cell })));
  const packs = inventedStock({
    key: 'packs',
    moduleIds: ['P1'],
    cellsInSeries: 8,
    cellsDrawnAs: { P1: cells },
    ...pack,
  });
  return { ...inventedStudy(), stocks: [newer, packs] };
}

function moduleOf(study: Study, id: string, instance: number): ModuleParameters {
  const module = sampleModules(study, instance).get(id);
  if (module === undefined) throw new Error(`no module ${id}`);
  return module;
}

/** Deviations of cells from the first of them, in which those of lot and module cancel. */
const fromFirst = (values: readonly number[]): readonly number[] => values.map((value) => value - (values[0] ?? 0));

describe('a pack that takes the cell draws of modules', () => {
  it('has their cells but for lot and module, which are its own', () => {
    // value = 100 Ah (1 + module + cell): differences between cells of a module hold the cell deviations alone.
    for (const instance of [1, 2, 37]) {
      const pack = moduleOf(studyWithPack(), 'P1', instance).capacityAh;
      const first = moduleOf(studyWithPack(), 'N1', instance).capacityAh;
      const second = moduleOf(studyWithPack(), 'N2', instance).capacityAh;
      const near = (values: readonly number[]) => fromFirst(values).map((ah) => expect.closeTo(ah, 10));
      expect(fromFirst(pack.slice(0, 4))).toEqual(near(first));
      expect(fromFirst(pack.slice(4))).toEqual(near(second));
      expect(Math.abs((pack[0] ?? 0) - (first[0] ?? 0))).toBeGreaterThan(1e-6);
    }
  });

  it('keeps the cell deviations alone where module and lot do not spread', () => {
    const study = studyWithPack();
    const stocks = study.stocks.map((stock) =>
      stock.kind === 'explicit'
        ? stock
        : { ...stock, quantities: { ...stock.quantities, capacityAh: relativeSpread(100, 0, CELL_SD) } },
    );
    const still = { ...study, stocks };
    const pair = [...moduleOf(still, 'N1', 5).capacityAh, ...moduleOf(still, 'N2', 5).capacityAh];
    expect(moduleOf(still, 'P1', 5).capacityAh).toEqual(pair);
  });

  it('leaves the modules as they were, and draws as before without the sharing', () => {
    const { cellsDrawnAs: _, ...own } = inventedStock({ key: 'packs', moduleIds: ['P1'], cellsInSeries: 8 });
    const alone: Study = { ...inventedStudy(), stocks: [inventedStock(), own] };
    expect(moduleOf(studyWithPack(), 'N1', 5)).toEqual(moduleOf(inventedStudy(), 'N1', 5));
    expect(moduleOf(alone, 'P1', 5).capacityAh).not.toEqual(moduleOf(studyWithPack(), 'P1', 5).capacityAh);
    // Lot and module draws do not depend on it.
    expect(moduleOf(alone, 'P1', 5).standbyA).toBe(moduleOf(studyWithPack(), 'P1', 5).standbyA);
  });

  it('draws lot and module independently of those modules', () => {
    // Correlation of module deviations over 2000 banks: 0 within 4 / sqrt(2000) = 0.09.
    const study = studyWithPack();
    const pairs = Array.from({ length: 2000 }, (_, i) => [
      moduleOf(study, 'P1', i + 1).overVoltageV,
      moduleOf(study, 'N1', i + 1).overVoltageV,
    ]);
    expect(Math.abs(correlation(pairs))).toBeLessThan(0.09);
  });

  it('has the same twin', () => {
    const { cellsDrawnAs: _, ...own } = inventedStock({ key: 'packs', moduleIds: ['P1'], cellsInSeries: 8 });
    const alone: Study = { ...inventedStudy(), stocks: [inventedStock(), own] };
    expect(meanModules(studyWithPack()).get('P1')).toEqual(meanModules(alone).get('P1'));
  });
});

function correlation(pairs: readonly (readonly number[])[]): number {
  const mean = (at: number): number => pairs.reduce((sum, pair) => sum + (pair[at] ?? 0), 0) / pairs.length;
  const [a, b] = [mean(0), mean(1)];
  const product = (i: number, j: number): number =>
    pairs.reduce((sum, pair) => sum + ((pair[i] ?? 0) - (i ? b : a)) * ((pair[j] ?? 0) - (j ? b : a)), 0);
  return product(0, 1) / Math.sqrt(product(0, 0) * product(1, 1));
}
