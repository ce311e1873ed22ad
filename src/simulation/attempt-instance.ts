import { NotConverged } from '../mathematics/not-converged.js';
import type { OutcomeRow } from '../measures/outcome-row.js';
import { type PreparedCandidate, simulateInstance } from './simulate-instance.js';

/** @returns the row of a sampled bank, or why it has none: its simulation does not converge */
export function attemptInstance(prepared: PreparedCandidate, instance: number): OutcomeRow | NotConverged {
  try {
    return simulateInstance(prepared, instance);
  } catch (error) {
    if (error instanceof NotConverged) return error;
    throw error;
  }
}
