/** One instance of one candidate: what was drawn, its measures and its values at checkpoints, null where one does not apply. */
export interface OutcomeRow {
  /** From 1; 0 is the twin. */
  readonly instance: number;
  /** In the order of the columns of the candidate's outcomes. */
  readonly values: readonly (number | null)[];
}
