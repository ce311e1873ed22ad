/** Where charger and load are connected to two rails, from string to string. */
export interface TakeOff {
  /** `same-end`: both at the first string; `diagonal`: minus at the first, plus at the last. */
  readonly kind: 'same-end' | 'diagonal';
  /** Of either rail, between the taps of neighbouring strings: one less than strings, each above 0. */
  readonly segmentOhm: readonly number[];
}

/**
 * A custom wiring: nodes by number, 0 bus minus and 1 bus plus. Modules are numbered string by string as in `strings` of
 * the candidate; `link` ties nodes between modules, `rail` those at the bus.
 */
export interface CustomNetwork {
  readonly nodes: number;
  readonly branches: readonly CustomBranch[];
}

export type CustomBranch =
  | { readonly kind: 'module'; readonly module: number; readonly from: number; readonly to: number }
  | { readonly kind: 'link' | 'rail'; readonly ohm: number; readonly from: number; readonly to: number };

/** What the maker of a module allows; null = not stated. */
export interface ModuleRatings {
  readonly continuousA: number | null;
  readonly peakA: number | null;
  /** Voltage that the open BMS can block. */
  readonly blockingV: number | null;
  readonly mostInSeries: number | null;
  readonly mostInParallel: number | null;
}

/** What the conductors and fuses of a bank are made for; null = not stated. */
export interface BankRatings {
  readonly leadA: number | null;
  readonly linkA: number | null;
  readonly fuseA: number | null;
  /** Current that the fuse of a string can break. */
  readonly fuseBreakingA: number | null;
}
