/** Values of a sample and how the instances behind them were drawn. */
export interface Drawn {
  /** One per instance that has a value, in order of instances, finite. */
  readonly values: Float64Array;
  /**
   * Number of the block of each value, ascending, where only whole blocks are independent of each other (stratified
   * plans); null where the instances themselves are.
   */
  readonly blocks: Int32Array | null;
}
