/** Which cycles of the horizon a measure speaks of. */
export type Window = 'horizon' | 'last-30' | 'last-7' | 'first' | 'last';

export type Statistic = 'share_of_banks' | 'mean' | 'median' | 'percentile_5' | 'percentile_95';

/**
 * One number per instance and candidate. The registry is the only place that knows a measure's name, unit and meaning:
 * columns of outcomes and summaries, data package, tables and help are made from it.
 */
export interface Measure {
  /** Column name, snake case; append only: it is part of what a run leaves. */
  readonly name: string;
  /** Unit as printed; `%` for shares, `` for counts. */
  readonly unit: string;
  /** `event`: 1 if it happened, else 0. `amount`: any number, null where it does not apply. */
  readonly kind: 'event' | 'amount';
  readonly window: Window;
  readonly statistics: readonly Statistic[];
  /** Plain words for people, without the window. */
  readonly title: string;
  /** Exact definition for the data package and the help. */
  readonly definition: string;
}

/** A quantity recorded at the checkpoint cycles of every instance. */
export interface CycleMeasure {
  readonly name: string;
  readonly unit: string;
  readonly title: string;
  readonly definition: string;
}

/** First and last cycle (from 1) of a window over a horizon. */
export function windowCycles(window: Window, cycles: number): { readonly from: number; readonly to: number } {
  switch (window) {
    case 'horizon':
      return { from: 1, to: cycles };
    case 'last-30':
      return { from: Math.max(1, cycles - 29), to: cycles };
    case 'last-7':
      return { from: Math.max(1, cycles - 6), to: cycles };
    case 'first':
      return { from: 1, to: 1 };
    case 'last':
      return { from: cycles, to: cycles };
  }
}
