import { createHash } from 'node:crypto';
import { existsSync, writeFileSync } from 'node:fs';
import { NotConverged } from '../../src/mathematics/not-converged.js';
import { outcomeLayout } from '../../src/outcomes/block.js';
import { type OutcomeColumn, type OutcomeRow, outcomeColumns } from '../../src/outcomes/columns.js';
import type { Candidate, Study } from '../../src/study/study.js';

/**
 * Stands in for the simulation where threads, folders and restarts are tested: values are digests of their address, so
 * that any mix-up shows. The study's title, which is no part of a simulation key, may order mischief:
 *
 *   exit CANDIDATE INSTANCE            the thread ends under it
 *   exit-once CANDIDATE INSTANCE FILE  the same, the first time only; FILE remembers
 *   throw CANDIDATE INSTANCE           the simulation fails
 *   diverge CANDIDATE INSTANCE         it does not converge; also with INSTANCE+INSTANCE...
 *   not-finite CANDIDATE INSTANCE      it gives infinity
 *   throw-ready CANDIDATE              getting the candidate ready fails
 *   slow MILLISECONDS                  every instance takes its time
 */
interface PreparedCandidate {
  readonly study: Study;
  readonly candidate: Candidate;
  readonly columns: readonly OutcomeColumn[];
}

export function prepareCandidate(study: Study, candidateKey: string): PreparedCandidate {
  const candidate = study.candidates.find(({ key }) => key === candidateKey);
  if (candidate === undefined) throw new Error(`no candidate ${candidateKey}`);
  if (study.title === `throw-ready ${candidateKey}`) throw new Error('no convergence of the twin');
  return { study, candidate, columns: outcomeColumns(outcomeLayout(study, candidate)) };
}

export function simulateInstance({ study, candidate, columns }: PreparedCandidate, instance: number): OutcomeRow {
  const infinite = makeMischief(study.title, candidate.key, instance);
  const digest = createHash('sha512').update(`${study.seed}/${candidate.wiring}/${instance}`).digest();
  return {
    instance,
    values: columns.map((column, index) => {
      if (infinite && column.name === 'lost_capacity') return Number.POSITIVE_INFINITY;
      const word = digest.readUInt32LE((index * 4) % 64) ^ (index * 2654435761);
      if (column.unit === '%' && column.role === 'measure') return word & 1;
      return (word & 7) === 0 ? null : word / 1e6;
    }),
  };
}

export function simulateTwin(prepared: PreparedCandidate): OutcomeRow {
  return simulateInstance(prepared, 0);
}

/** @returns whether the outcome shall not be finite */
function makeMischief(order: string, candidate: string, instance: number): boolean {
  const [deed, argument = '', at, file = ''] = order.split(' ');
  if (deed === 'slow') Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, Number(argument));
  if (deed === 'diverge' && argument === candidate && at?.split('+').map(Number).includes(instance)) {
    throw new NotConverged(`bank ${instance} did not settle`);
  }
  if (argument !== candidate || Number(at) !== instance) return false;
  if (deed === 'exit' || (deed === 'exit-once' && !existsSync(file))) {
    if (deed === 'exit-once') writeFileSync(file, '');
    process.exit(3);
  }
  if (deed === 'throw') throw new Error('no convergence');
  return deed === 'not-finite';
}
