/** Exit statuses of every command; part of the help and of the contract with scripts. */
export const EXIT_STATUS = {
  done: 0,
  /** A fault of this program; the stack and how to report it are printed. */
  ourFault: 1,
  /** Command line, study or input. */
  input: 2,
  /** A candidate that must meet its acceptance lines (`run --require`) fails one. */
  requirementNotMet: 3,
  /** Whether it meets them is not decided. */
  requirementNotDecided: 4,
  /** The run ended with blocks missing. */
  blocksMissing: 5,
  interrupted: 130,
  terminated: 143,
} as const;

export type ExitStatus = (typeof EXIT_STATUS)[keyof typeof EXIT_STATUS];
