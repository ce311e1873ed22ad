import { performance } from 'node:perf_hooks';
import { workerData } from 'piscina';
import {
  type BlockOrder,
  type BlockReply,
  blockInstances,
  type FailedInstance,
  outcomeLayout,
  TWIN_BLOCK,
} from '../src/outcomes/block.js';
import { encodeBlock } from '../src/outcomes/block-csv.js';
import { outcomeColumns } from '../src/outcomes/columns.js';
import { attemptInstance } from '../src/simulation/attempt-instance.js';
import { type PreparedCandidate, prepareCandidate, simulateTwin } from '../src/simulation/simulate-instance.js';
import type { Study } from '../src/study/study.js';

const study: Study = workerData;
const prepared = new Map<string, PreparedCandidate>();

/** Prepared once per thread, when the candidate's first block comes. */
function preparedCandidate(key: string): PreparedCandidate {
  const known = prepared.get(key);
  if (known !== undefined) return known;
  const fresh = prepareCandidate(study, key);
  prepared.set(key, fresh);
  return fresh;
}

/** Computes one block; the study is in the thread already. */
export default function computeBlock({ task: { candidate: key, block }, beats }: BlockOrder): BlockReply {
  const startMs = performance.now();
  const range = blockInstances(block, study);
  // Getting a candidate ready takes its twin through its course: a fault before the first instance is the twin's.
  let instance = 0;
  const failed: FailedInstance[] = [];
  function* rows(candidate: PreparedCandidate) {
    for (instance = range.first; instance <= range.last; instance++) {
      Atomics.add(beats, 0, 1);
      const row = block === TWIN_BLOCK ? simulateTwin(candidate) : attemptInstance(candidate, instance);
      if (row instanceof Error) failed.push({ instance, message: row.message });
      else yield row;
    }
  }
  try {
    const candidate = preparedCandidate(key);
    const columns = outcomeColumns(outcomeLayout(study, candidate.candidate));
    const csv = encodeBlock(columns, range, rows(candidate), failed);
    const computeS = (performance.now() - startMs) / 1000;
    return failed.length === 0 ? { csv, computeS } : { csv, computeS, failed };
  } catch (error) {
    // Classes do not cross threads, and an instance fails the same way every time: the address is what helps.
    const { message, stack = message } = error instanceof Error ? error : new Error(String(error));
    return { fault: { instance, message, stack } };
  }
}
