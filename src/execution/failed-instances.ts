import type { FailedInstance } from '../outcomes/block.js';
import type { Study } from '../study/study.js';

/** An instance without an outcome, with its candidate. */
export interface CandidateFailure extends FailedInstance {
  readonly candidate: string;
}

/**
 * Instances of each candidate that may fail before a run ends.
 *
 * @param fraction of the instances of the study, 0 to 1
 */
export function allowedFailures({ instances }: Pick<Study, 'instances'>, fraction: number): number {
  return Math.floor(instances * fraction);
}

/** Failures among the instances 1 to `instances`, candidate by candidate in the order of the study. */
export function failuresWithin(
  study: Study,
  blocks: readonly { readonly candidate: string; readonly failed?: readonly FailedInstance[] }[],
  instances: number,
): readonly CandidateFailure[] {
  return study.candidates.flatMap(({ key: candidate }) =>
    blocks
      .filter((block) => block.candidate === candidate)
      .flatMap(({ failed = [] }) => failed)
      .filter(({ instance }) => instance <= instances)
      .map((failure) => ({ ...failure, candidate }))
      .sort((one, other) => one.instance - other.instance),
  );
}
