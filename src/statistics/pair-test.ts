import { betaShare } from '../mathematics/incomplete-beta.js';
import { blockMoments, LEAST_BLOCKS } from './block-estimate.js';
import type { Drawn } from './drawn.js';
import { summariseMoments } from './moments.js';

/** How a difference between two candidates is tested against none. */
export interface PairTest {
  /** Two-sided; null where nothing can be said. */
  readonly pValue: number | null;
  readonly method: '' | 'mcnemar-exact' | 'paired-t' | 'paired-block-t';
}

const NO_TEST: PairTest = { pValue: null, method: '' };

/**
 * Tests that the mean difference is 0, by the t that its interval is made of: the interval leaves out 0 if and only if p
 * is below 1 less its confidence.
 *
 * @param drawn first less second, one per instance that has both values
 */
export function meanDifferenceTest({ values, blocks }: Drawn): PairTest {
  if (blocks === null) {
    const { count, mean, variance } = summariseMoments(values);
    return tTest(mean, Math.sqrt(variance / count), count - 1, 'paired-t');
  }
  const { blocks: count, mean, standardError } = blockMoments(values, blocks);
  return count < LEAST_BLOCKS ? NO_TEST : tTest(mean, standardError, count - 1, 'paired-block-t');
}

/** Equal differences tell nothing of chance, so there is no test of them. */
function tTest(mean: number, standardError: number, degreesOfFreedom: number, method: PairTest['method']): PairTest {
  if (!(degreesOfFreedom >= 1 && standardError > 0)) return NO_TEST;
  const t = mean / standardError;
  return { pValue: betaShare(degreesOfFreedom / (degreesOfFreedom + t * t), degreesOfFreedom / 2, 0.5), method };
}
