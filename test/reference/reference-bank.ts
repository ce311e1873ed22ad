import type { Candidate, DutySegment, ModuleParameters, OcvTable } from '../../src/study/study.js';

/** One bank written down exactly, with what is done to it: all that a simulation needs and nothing drawn. */
export interface ReferenceBank {
  readonly name: string;
  /** Modules of each string from its negative end. */
  readonly modules: readonly (readonly ModuleParameters[])[];
  readonly candidate: Candidate;
  readonly ocvTables: readonly OcvTable[];
  /** The segments of every cycle, in order; the whole is run once. */
  readonly cycles: readonly (readonly DutySegment[])[];
  /** Factors on the load and on the charging power of this bank. */
  readonly loadFactor: number;
  readonly chargeFactor: number;
}
