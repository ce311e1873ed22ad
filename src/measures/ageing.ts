import { meanOf } from './drift.js';
import type { MeasureName } from './registry.js';

/** What ageing has left of a bank. */
export interface AgeingFacts {
  /** Capacity of each cell, fraction of that at the start. */
  readonly left: Float64Array;
  /** First cell of each module, and the number of cells at the end. */
  readonly cellStart: Int32Array;
}

/** Measures of ageing. */
export type AgeingNames = Extract<MeasureName, `capacity_fade${string}`>;

/** @param facts null where no cell ages */
export function ageingMeasures(facts: AgeingFacts | null): Record<AgeingNames, number | null> {
  if (facts === null) return { capacity_fade: null, capacity_fade_worst_cell: null, capacity_fade_spread: null };
  const { left, cellStart } = facts;
  const fade = left.map((fraction) => 100 * (1 - fraction));
  const ofModules = Array.from(cellStart.subarray(1), (end, m) => meanOf(fade, cellStart[m], end));
  return {
    capacity_fade: meanOf(fade, 0, fade.length),
    capacity_fade_worst_cell: Math.max(...fade),
    capacity_fade_spread: Math.max(...ofModules) - Math.min(...ofModules),
  };
}
