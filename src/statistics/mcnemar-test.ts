import { binomialCdf } from '../mathematics/binomial.js';
import { type PairedCounts, requirePairedCounts } from './paired-counts.js';

/** Two-sided probabilities of a split of the discordant pairs as uneven as the one seen, or more so, by chance alone. */
export interface McNemar {
  /** Never below what it says. */
  readonly exact: number;
  /** The split that was seen counted half: closer to what it says, at times below it. */
  readonly mid: number;
}

/**
 * McNemar's exact test that an event is as likely under either candidate. Only instances that differ count: of f + g of
 * them, the number under the first only is binomial (f + g, 1/2) if there is no difference.
 *
 * @throws RangeError if a count is not a whole number from 0
 * @see McNemar 1947, Psychometrika 12, 153-157; Fagerland, Lydersen & Laake 2013, BMC Med. Res. Methodol. 13, 91
 */
export function mcnemarTest(counts: PairedCounts): McNemar {
  requirePairedCounts(counts);
  const { onlyFirst, onlySecond } = counts;
  const discordant = onlyFirst + onlySecond;
  const fewer = Math.min(onlyFirst, onlySecond);
  const upTo = binomialCdf(fewer, discordant, 0.5);
  const below = binomialCdf(fewer - 1, discordant, 0.5);
  return { exact: Math.min(1, 2 * upTo), mid: Math.min(1, upTo + below) };
}
