/** How the draws of a block are spread over their range; the words of the key `plan`. */
export const SAMPLING_PLANS = ['independent', 'latin-hypercube', 'sobol'] as const;

export type SamplingPlan = (typeof SAMPLING_PLANS)[number];

/**
 * Whether instances of a block depend on each other, so that only whole blocks are independent repetitions: a block then
 * is never short, and an error comes from the means of blocks.
 */
export function bindsBlocks(plan: SamplingPlan): boolean {
  return plan !== 'independent';
}
