import { studentQuantile } from '../mathematics/inverse-cdf.js';
import { type Estimate, notEstimable, requireConfidence } from './estimate.js';
import type { Method } from './method.js';
import { summariseMoments } from './moments.js';

/**
 * Mean with Student's interval over independent instances: mean -+ t sd / sqrt(n), n - 1 degrees of freedom.
 *
 * Equal values give an interval without width and say so in the note: nothing in the sample tells how far others lie.
 *
 * @param values one per instance, finite, any unit
 * @param confidence two-sided, e.g. 0.95
 * @returns in the unit of `values`; not estimable from fewer than two
 * @throws RangeError if the confidence lies outside 0.5 to 0.9999
 * @see Student 1908, Biometrika 6, 1-25
 */
export function meanEstimate(values: Float64Array, confidence: number): Estimate {
  return studentEstimate(values, confidence, 'student-t');
}

/**
 * Mean difference of two candidates on the same instances: Student's interval over the differences.
 *
 * @param differences first less second, one per instance that has both values
 * @param confidence two-sided, e.g. 0.95
 * @returns in the unit of `differences`; not estimable from fewer than two
 * @throws RangeError if the confidence lies outside 0.5 to 0.9999
 */
export function pairedMeanEstimate(differences: Float64Array, confidence: number): Estimate {
  return studentEstimate(differences, confidence, 'paired-t');
}

function studentEstimate(values: Float64Array, confidence: number, method: Method): Estimate {
  requireConfidence(confidence);
  const { count, mean, variance } = summariseMoments(values);
  if (count < 2) return notEstimable(count);
  const reach = studentQuantile((1 + confidence) / 2, count - 1) * Math.sqrt(variance / count);
  const note = variance === 0 ? 'all values equal' : '';
  return { estimate: mean, lower: mean - reach, upper: mean + reach, method, note, instances: count };
}
