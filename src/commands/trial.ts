import type { ProspectiveCurrent } from '../simulation/prospective-current.js';
import type { Study } from '../study/study.js';

/** How fast a study goes, measured on a few of its banks. */
export interface Trial {
  /** Cycles of one bank per second on one thread. */
  readonly bankCyclesPerSecond: number;
}

/** What becomes of a twin, the bank with every value at its mean, over the whole horizon. */
export interface TwinFacts {
  readonly losesLoad: boolean;
  /** Time that the cycles take, s. */
  readonly elapsedS: number;
}

/** What `check` needs of the simulation; injected, so that it can be tested without one. */
export interface CheckAids {
  /** Runs a few banks for about two seconds. */
  readonly trial: (study: Study, now: () => number) => Trial;
  /** The twin of every candidate, in the order of the study. */
  readonly twins: (study: Study) => readonly TwinFacts[];
  /** Prospective short-circuit current of every candidate, in the order of the study. */
  readonly prospectiveCurrents: (study: Study) => readonly ProspectiveCurrent[];
}

/** @returns cycles of single banks in a whole run */
export function bankCycles(study: Study): number {
  return study.instances * study.cycles * study.candidates.length;
}
