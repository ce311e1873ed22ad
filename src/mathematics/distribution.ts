/** A law of chance with bounded values, in a unit of its own. */
export interface Distribution {
  readonly mean: number;
  readonly sd: number;
  /** Least and greatest value. */
  readonly lower: number;
  readonly upper: number;
  /** Share of all values at or below x, for any x. */
  readonly cdf: (x: number) => number;
  /** The value below which the share u lies, both ends of 0 to 1 included. */
  readonly quantile: (u: number) => number;
}
