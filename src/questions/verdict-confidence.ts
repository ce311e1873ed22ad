import { bonferroniConfidence } from '../statistics/holm.js';
import type { Study } from '../study/study.js';

/**
 * Two-sided confidence of the intervals that verdicts rest on. A run that may end at several looks gives each the chance
 * to mislead, so that they share what the confidence leaves (Bonferroni): a verdict holds whenever the run ended.
 */
export function verdictConfidence({ confidenceFraction, enough }: Study): number {
  return bonferroniConfidence(confidenceFraction, enough?.looks.length ?? 1);
}
