import { blockMeanEstimate, blockMoments } from './block-estimate.js';
import type { Drawn } from './drawn.js';
import { type Estimate, withRemark } from './estimate.js';
import { meanEstimate, pairedMeanEstimate } from './mean-estimate.js';
import { proportionEstimate } from './proportion-estimate.js';
import { countUnlikeMost } from './unlike-most.js';

/** Fewer blocks, or fewer events (or others) per block, make the interval over blocks of a share cover too little. */
const LEAST_BLOCKS_OF_SHARES = 16;
const LEAST_EVENTS_PER_BLOCK = 5;

/**
 * Where most values are equal and fewer than this are not, the interval of their mean covers less than it says: by
 * calibration 0.85 with 6 of 128 banks unlike the others, 0.91 with 26 of 512, 0.94 with 102 of 2048.
 */
const ENOUGH_UNLIKE_MOST = 100;

/** Remark on an estimate that takes instances of blocks for independent ones: no plan is worse than that. */
const POOLED = 'pooled over blocks, conservative';

/**
 * Mean, as the sample was drawn: Student's interval over instances, or over blocks of them.
 *
 * Per-instance rates are such values: trips come in bursts, so that their sum is no Poisson count. Where few instances
 * carry the mean the note says so.
 *
 * @param confidence two-sided, e.g. 0.95
 */
export function meanOf({ values, blocks }: Drawn, confidence: number): Estimate {
  const estimate = blocks === null ? meanEstimate(values, confidence) : blockMeanEstimate(values, blocks, confidence);
  if (estimate.estimate === null) return estimate;
  const unlike = countUnlikeMost(values);
  if (unlike === null || unlike === 0 || unlike >= ENOUGH_UNLIKE_MOST) return estimate;
  return withRemark(estimate, `rests on ${unlike} unlike the others, covers less than it says`);
}

/** The same of differences between two candidates on the same instances. */
export function meanDifferenceOf({ values, blocks }: Drawn, confidence: number): Estimate {
  if (blocks === null) return withFewNoted(pairedMeanEstimate(values, confidence), values);
  const estimate = withFewNoted(blockMeanEstimate(values, blocks, confidence), values);
  return estimate.method === '' ? estimate : { ...estimate, method: 'paired-block-t' };
}

/**
 * Share of instances with an event, as the sample was drawn: the interval of independent instances, or that over blocks
 * where there are enough of them, events and instances without.
 *
 * @param drawn values 1 with the event, else 0
 */
export function shareOf(drawn: Drawn, confidence: number): Estimate {
  const { values, blocks } = drawn;
  const events = values.reduce((sum, one) => sum + one, 0);
  if (blocks !== null && carryShares(events, drawn)) return blockMeanEstimate(values, blocks, confidence);
  return asPooled(proportionEstimate(events, values.length, confidence), drawn);
}

/**
 * Whether an interval over blocks may be trusted for shares.
 *
 * @param events instances that count, of those drawn
 */
export function carryShares(events: number, { values, blocks }: Drawn): boolean {
  if (blocks === null) return false;
  const moments = blockMoments(values, blocks);
  const least = LEAST_EVENTS_PER_BLOCK * moments.blocks;
  return (
    moments.blocks >= LEAST_BLOCKS_OF_SHARES &&
    events >= least &&
    values.length - events >= least &&
    moments.standardError > 0
  );
}

/** An estimate that takes the instances drawn for independent, with a remark if they are not. */
export function asPooled(estimate: Estimate, { blocks }: Drawn): Estimate {
  return blocks === null || estimate.estimate === null ? estimate : withRemark(estimate, POOLED);
}

/** The estimate of a mean, with a remark if few instances carry it. */
function withFewNoted(estimate: Estimate, values: Float64Array): Estimate {
  const unlike = countUnlikeMost(values);
  const areFew = unlike !== null && unlike > 0 && unlike < ENOUGH_UNLIKE_MOST;
  if (!areFew || estimate.estimate === null) return estimate;
  return withRemark(estimate, `rests on ${unlike} unlike the others, covers less than it says`);
}
