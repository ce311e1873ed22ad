import type { ChargerSettings, LoadSettings } from '../study/study.js';
import type { Bank } from './bank.js';
import type { BankState } from './bank-state.js';
import type { LeftOut } from './circuit-scope.js';
import type { WiringGraph } from './wiring-graph.js';

/** A bank with what stands at its terminals, as a circuit: its elements, its state at one instant, its course from there. */
export interface BankCircuit {
  /** As it is at the temperatures and the age of the first instant. */
  readonly bank: Bank;
  readonly graph: WiringGraph;
  /** At the first instant, before anything is switched there. */
  readonly state: BankState;
  /** Sum of the cell voltages of each module, and the voltage at the bus, about the first instant. */
  readonly stackV: Float64Array;
  readonly busV: number;
  readonly charger: ChargerSettings;
  readonly load: LoadSettings;
  /** The charger works towards absorption; otherwise it floats or is off. */
  readonly charging: boolean;
  readonly loadConnected: boolean;
  /** Seconds since the bank was put together. */
  readonly startS: number;
  readonly endS: number;
  /** Demand from each of its changes on, the first at `startS`. */
  readonly demand: readonly DemandChange[];
  /** When cycles begin, the first at `startS`. */
  readonly cycleStartS: readonly number[];
  /** What the bank has and such a circuit leaves out. */
  readonly leftOut: readonly LeftOut[];
}

/** What load and sun or mains ask and offer from one instant on, factors of the bank included. */
export interface DemandChange {
  readonly atS: number;
  readonly loadW: number;
  readonly loadA: number;
  /** `Infinity` = bounded by the charger's limit alone. */
  readonly chargeW: number;
  /** It came because the charger was done, not by the clock. */
  readonly afterCharge: boolean;
}
