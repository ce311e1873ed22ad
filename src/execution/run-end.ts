import type { Study } from '../study/study.js';
import { readDescribedResults } from './described-results.js';
import type { Session } from './run-record.js';

/**
 * Sampled banks with which a run is complete: those of its study, or fewer once it has ended at a look because they were
 * enough.
 *
 * @param session the latest of the folder
 * @param description text of the description of its results, if there is one
 */
export function instancesOfEnd(study: Study, session: Session | null, description: string | null): number {
  if (study.enough === undefined || session?.ended !== 'complete' || description === null) return study.instances;
  const instances = readDescribedResults(description)?.instances;
  return study.enough.looks.find((look) => look === instances) ?? study.instances;
}
