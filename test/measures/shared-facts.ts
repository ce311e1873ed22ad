import type { SharingFacts } from '../../src/measures/sharing.js';

/** Two strings over ten days, no links, no ratings, nothing ever open; invented. */
export const SHARED: SharingFacts = {
  strings: 2,
  elapsedS: 864_000,
  peakBankA: 100,
  rmsBankA: 40,
  peakModuleA: 60,
  rmsModuleA: 22,
  peakOfRating: null,
  aboveContinuousS: null,
  peakLinkA: null,
  rmsLinkA: null,
  joiningV: 0.05,
  joiningA: 3.85,
  circulatingAs: 36_000,
  mostThroughputAs: 1200,
  leastThroughputAs: 1000,
  blockingV: null,
  blockingOfRating: null,
  leadRatingA: null,
  fuseRatingA: null,
  linkRatingA: null,
};
