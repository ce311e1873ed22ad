import type { OutcomeRow } from '../outcomes/columns.js';
import type { Candidate, Study } from '../study/study.js';

// Contract of the room; the body follows.
export interface PreparedCandidate {
  readonly study: Study;
  readonly candidate: Candidate;
}
export declare function prepareCandidate(study: Study, candidateKey: string): PreparedCandidate;
export declare function simulateInstance(prepared: PreparedCandidate, instance: number): OutcomeRow;
export declare function simulateTwin(prepared: PreparedCandidate): OutcomeRow;
