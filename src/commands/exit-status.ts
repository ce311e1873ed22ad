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
  /** The run ended with blocks missing, or its results could not be written. */
  blocksMissing: 5,
  /** `status`: the run goes on. */
  running: 6,
  /** `verify` found what is not as it was written, or not computed the same again. */
  different: 7,
  hungUp: 129,
  interrupted: 130,
  terminated: 143,
} as const;

export type ExitStatus = (typeof EXIT_STATUS)[keyof typeof EXIT_STATUS];

/** Statuses of a command that was interrupted, by the signal. */
export const STATUS_OF_SIGNAL = {
  SIGHUP: EXIT_STATUS.hungUp,
  SIGINT: EXIT_STATUS.interrupted,
  SIGTERM: EXIT_STATUS.terminated,
} as const;
