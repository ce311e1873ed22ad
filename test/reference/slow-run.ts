import type { SlowEvent } from './slow-event.js';

/** One instant of a slow run. */
export interface SlowSample {
  readonly timeS: number;
  readonly busV: number;
  /** Net current into the bank. */
  readonly bankA: number;
  /** String by string from the negative end; one pack per string for native wiring. */
  readonly modules: readonly SlowModuleSample[];
}

/** One module, or pack, at that instant; lists are over cells. */
export interface SlowModuleSample {
  readonly string: number;
  readonly position: number;
  readonly currentA: number;
  readonly terminalV: number;
  readonly chargeFraction: readonly number[];
  readonly cellV: readonly number[];
  readonly chargeOpen: boolean;
  readonly dischargeOpen: boolean;
}

/** What a slow run leaves. */
export interface SlowRun {
  readonly samples: readonly SlowSample[];
  readonly events: readonly SlowEvent[];
  /** Charge fraction of every cell after every cycle, and the visit that may follow it: [cycle][cell], strings and positions in order. */
  readonly cycleEndCharge: readonly (readonly number[])[];
  /** Hysteresis of every cell in the end. */
  readonly endHysteresis: readonly number[];
  readonly cycleEndS: readonly number[];
  /** When each segment began: the starts of phases that event tolerances count from. */
  readonly segmentStartS: readonly number[];
  readonly servedWh: number;
  /** Not supplied: of the constant-power demand, and of the constant-current demand. */
  readonly lostWh: number;
  readonly lostAh: number;
  /** Steps taken, shortened ones included. */
  readonly steps: number;
}
