import { meanOf } from '../mathematics/mean.js';
import type { QuantityName } from '../study/quantities.js';
import type { MeasuredModules, PopulationStock } from '../study/study.js';
import { deviationOf } from './deviation.js';
import type { PerQuantity } from './quantity-order.js';
import type { UniformOf } from './streams.js';

/** Deviations of a module, and of its cells from it. */
export interface ModuleDeviations {
  readonly shared: PerQuantity<number>;
  readonly cells: readonly PerQuantity<number>[];
}

/**
 * What was measured of a module, in the order of the quantities measured: its own row or one drawn for it (a whole row,
 * each as likely as any other), each value with its uncertainty, normal and cut at 5 sd.
 *
 * @param uniformOf uniforms of the module at level `module`
 */
export function sampleMeasured(measured: MeasuredModules, module: string, uniformOf: UniformOf): readonly number[] {
  return rowOf(measured, module, uniformOf).map((value, place) => {
    const sd = measured.uncertaintySd[place] ?? 0;
    if (sd === 0) return value;
    return value + deviationOf({ law: 'normal', sd }, 1).quantile(uniformOf(`${measured.quantities[place]} measured`));
  });
}

/** What was measured of a module without uncertainty; the mean of all rows where rows are drawn. */
export function meanMeasured(measured: MeasuredModules, module: string): readonly number[] {
  if (measured.rows === 'of-each-module') return measured.valuesOf[module] ?? [];
  return measured.quantities.map((_, place) => meanOf(measured.values.map((row) => row[place] ?? Number.NaN)));
}

/**
 * Deviations with which a module has its measured values.
 *
 * A module has the capacity of its smallest cell, and of everything else what its cells have on average. Deviations of
 * cells are moved by as much as keeps that: d - min d for capacity, d - mean d for the others.
 */
export function withMeasured(
  { quantities, measured }: PopulationStock,
  values: readonly number[],
  { shared, cells }: ModuleDeviations,
): ModuleDeviations {
  const moved: Record<QuantityName, number> = { ...shared };
  const ofCells = cells.map((own): Record<QuantityName, number> => ({ ...own }));
  for (const [place, name] of (measured?.quantities ?? []).entries()) {
    const { nominal, relative } = quantities[name];
    const value = values[place] ?? Number.NaN;
    moved[name] = relative ? value / nominal - 1 : value - nominal;
    const own = cells.map((cell) => cell[name]);
    const middle = name === 'capacityAh' ? Math.min(...own) : meanOf(own);
    for (const cell of ofCells) cell[name] -= middle;
  }
  return { shared: moved, cells: ofCells };
}

function rowOf(measured: MeasuredModules, module: string, uniformOf: UniformOf): readonly number[] {
  if (measured.rows === 'of-each-module') return measured.valuesOf[module] ?? [];
  return measured.values[Math.floor(measured.values.length * uniformOf('measured row'))] ?? [];
}
