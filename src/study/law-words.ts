import type { LawInput, MixedInput } from './law.js';
import { lawOfPart } from './law-in-si.js';
import { lawMoments } from './law-moments.js';
import type { Law } from './study.js';
import { differenceInUnitOfKey, unitOfDifference } from './units.js';

/** The quantity that a law belongs to, as far as its words need it. */
interface WordsOwner {
  readonly key: string;
  readonly nominalSi: number;
  readonly relative: boolean;
}

/** A cut that takes off less of the standard deviation than this is not worth a word. */
const TOLD_FROM = 5e-4;

/**
 * A law in a few words, e.g. `sd 0.012 V, cut at +-0.04 V`; without the name of a law it is normal.
 *
 * Where a cut takes a visible part of the standard deviation, what is left of it is said; where a law is not written by
 * its standard deviation and is not plain either (mixtures, measured values), its standard deviation is said.
 *
 * @param law as written
 * @param resolved the same law in the units of the resolved study
 */
export function lawWords(law: LawInput, resolved: Law, owner: WordsOwner): string {
  const words = wordsOf(law, unitOfDifference(owner.key));
  const left = lawMoments(resolved, owner.relative ? 1 : owner.nominalSi).sd;
  const isMeasure = law.law === 'mixture' || law.law === 'resampled';
  const isCut = 'sd' in resolved && Math.abs(left / resolved.sd - 1) >= TOLD_FROM;
  if (!isMeasure && !isCut) return words;
  return `${words} (sd ${isMeasure ? '' : 'left '}${amountWords(left, owner)})`;
}

function wordsOf(law: LawInput, unit: string): string {
  const amount = (own: number | undefined, percent: number | undefined): string => {
    const [value, suffix] = own === undefined ? [percent, '%'] : [own, unit];
    return `${value} ${suffix}`.trim();
  };
  const wide = (written: { half_width?: number | undefined; half_width_percent?: number | undefined }): string =>
    `within +-${amount(written.half_width, written.half_width_percent)} of the middle`;
  switch (law.law) {
    case 'fixed':
      return 'none';
    case 'normal':
      return `sd ${amount(law.sd, law.sd_percent)}`;
    case 'lognormal':
      return `lognormal, sd ${amount(law.sd, law.sd_percent)}`;
    case 'uniform':
      return `uniform, +-${amount(law.half_width, law.half_width_percent)}`;
    case 'triangular':
      return `triangular, ${wide(law)}, peak at ${law.peak_percent ?? 50} %`;
    case 'weibull':
      return `Weibull of shape ${law.shape}, sd ${amount(law.sd, law.sd_percent)}`;
    case 'beta':
      return `beta ${law.alpha} and ${law.beta}, ${wide(law)}`;
    case 'resampled':
      return `resampled from ${law.column} of ${law.file}`;
    case 'mixture':
      return `mixture of ${law.of.map((part) => partWords(part, unit, amount)).join(' and ')}`;
    case 'truncated-normal':
      return `sd ${amount(law.sd, law.sd_percent)}, cut at +-${amount(law.half_width, law.half_width_percent)}`;
  }
}

function partWords(
  part: MixedInput,
  unit: string,
  amount: (own: number | undefined, percent: number | undefined) => string,
): string {
  const isMoved = (part.at ?? part.at_percent ?? 0) !== 0;
  const place = isMoved ? ` at ${amount(part.at, part.at_percent)}` : '';
  return `${part.weight} x (${wordsOf(lawOfPart(part), unit)}${place})`;
}

function amountWords(value: number, { key, relative }: WordsOwner): string {
  const [shown, suffix] = relative ? [value * 100, '%'] : [differenceInUnitOfKey(key, value), unitOfDifference(key)];
  return `${Number(shown.toPrecision(4))} ${suffix}`.trim();
}
