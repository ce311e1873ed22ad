/** Cells that were ever below this voltage count as damaged, V (common practice, no source). */
export const DAMAGED_BELOW_V = 2;

/** What one bank took, gave and lost over its whole course, and how it was looked after. */
export interface BankAccount {
  readonly visits: number;
  /** Energy into and out of the bank at its bus, Wh, 0 or more. */
  readonly inWh: number;
  readonly outWh: number;
  /** Gain of stored energy in the course of the duty; what visits added is left out. */
  readonly storedGainWh: number;
  /** Heat in leads and links. */
  readonly wiringWh: number;
  readonly bleedWh: number;
  /** Charge that equalisers took from modules, the part of it from the one of two that missed more, and their losses. */
  readonly equaliserAh: number;
  readonly equaliserCounterAh: number;
  readonly equaliserWh: number;
  /** Time for which the charger fed the load while no module conducted, s. */
  readonly chargerOnlyS: number;
  /** Cells that were ever below `DAMAGED_BELOW_V`. */
  readonly damagedCells: number;
  /** Longest time without a full charge: from the start, or a full charge or visit, to the next one or the end, s. */
  readonly longestUnfilledS: number;
  /** Of the full charge that ended it, from the emptiest moment before; null if none ended it. */
  readonly tripsToFull: number | null;
  readonly toFullAh: number | null;
}
