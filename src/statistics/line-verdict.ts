import type { Estimate } from './estimate.js';

export type LineVerdict = 'meets' | 'fails' | 'not decided';

/**
 * Holds an estimate against an acceptance line.
 *
 * `meets` if the whole interval keeps to the line (the limit itself included), `fails` if the whole interval lies beyond
 * it, `not decided` if it straddles the line or there is no interval. Only one end of the two-sided interval decides, so
 * a confidence of 95 % is one-sided 97.5 %.
 *
 * @param limit in the unit of the estimate
 */
export function lineVerdict(estimate: Estimate, bound: 'at-most' | 'at-least', limit: number): LineVerdict {
  const { lower, upper } = estimate;
  if (lower === null || upper === null) return 'not decided';
  if (bound === 'at-most') {
    if (upper <= limit) return 'meets';
    return lower > limit ? 'fails' : 'not decided';
  }
  if (lower >= limit) return 'meets';
  return upper < limit ? 'fails' : 'not decided';
}
