import { ratingsOfModules } from './ratings.js';
import type { Candidate, Study } from './study.js';

const ADVICE = 'take modules made for it, or fewer of larger ones';

/** @returns where the counts of a candidate exceed what its modules are rated for, one sentence each */
export function countWarnings(study: Study, candidate: Candidate): readonly string[] {
  const ratings = ratingsOfModules(study, candidate).flat();
  const least = (pick: 'mostInSeries' | 'mostInParallel'): number =>
    ratings.reduce(
      (most, rating) => Math.min(most, rating?.[pick] ?? Number.POSITIVE_INFINITY),
      Number.POSITIVE_INFINITY,
    );
  const warnings: string[] = [];
  const inSeries = candidate.strings[0]?.length ?? 0;
  const inParallel = candidate.strings.length;
  if (inSeries > least('mostInSeries')) {
    warnings.push(`${inSeries} modules in series, but the maker of one allows ${least('mostInSeries')}: ${ADVICE}`);
  }
  if (inParallel > least('mostInParallel')) {
    warnings.push(
      `${inParallel} strings in parallel, but the maker of one allows ${least('mostInParallel')}: ${ADVICE}`,
    );
  }
  return warnings;
}
