/** Where a value of the resolved study comes from. */
export type OriginSource = 'study' | 'command line' | 'bank' | `grade ${string}` | `like ${string}` | 'default';

/** One value of the resolved study as `check` prints it. */
export interface Origin {
  /** Study path, e.g. `stock.newer.capacity_Ah.module`. */
  readonly path: string;
  /** As printed, in the unit of the study's key. */
  readonly value: string;
  readonly unit: string;
  readonly source: OriginSource;
}
