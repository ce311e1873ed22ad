import type { LawInput, MixedInput, MixtureInput } from './law.js';
import { measuredColumn } from './measured-column.js';
import type { Reading } from './reading.js';
import type { Law, MixtureLaw, MixturePart } from './study.js';
import type { StudyPath } from './study-path.js';
import { differenceFromKey } from './units.js';

/** The quantity that a law belongs to. */
export interface LawOwner {
  /** Key of the study that names the unit. */
  readonly key: string;
  readonly nominalSi: number;
  /** Amounts become fractions of the nominal value. */
  readonly relative: boolean;
  /** Where the law is written. */
  readonly path: StudyPath;
  readonly reading: Reading;
}

/** @returns true if the law spreads nothing */
export function isFixed(law: LawInput): boolean {
  switch (law.law) {
    case 'fixed':
      return true;
    case 'resampled':
      return false;
    case 'mixture':
      return law.of.every((part) => isFixed(lawOfPart(part)) && offsetOf(part) === offsetOf(law.of[0]));
    case 'uniform':
    case 'triangular':
    case 'beta':
      return (law.half_width ?? law.half_width_percent) === 0;
    default:
      return (law.sd ?? law.sd_percent) === 0;
  }
}

/** @returns true if every amount of the law is in percent of the nominal value */
export function isInPercent(law: LawInput): boolean {
  if (law.law === 'resampled') return false;
  if (law.law === 'mixture') return law.of.every((part) => !part.at && isInPercent(lawOfPart(part)));
  const sd = 'sd' in law && law.sd !== undefined;
  const halfWidth = 'half_width' in law && law.half_width !== undefined;
  return !sd && !halfWidth;
}

/** @returns true if some amount of the law is in percent of the nominal value */
export function hasPercent(law: LawInput): boolean {
  if (law.law === 'mixture') {
    return law.of.some((part) => part.at_percent !== undefined || hasPercent(lawOfPart(part)));
  }
  const sd = 'sd_percent' in law && law.sd_percent !== undefined;
  const halfWidth = 'half_width_percent' in law && law.half_width_percent !== undefined;
  return sd || halfWidth;
}

/** @returns the law in the units of the resolved study; a law that cannot be is a fault and comes out fixed */
export function lawInSi(law: LawInput, owner: LawOwner): Law {
  if (isFixed(law)) return { law: 'fixed' };
  return law.law === 'mixture' ? mixtureInSi(law, owner) : plainLawInSi(law, owner);
}

/** @returns the law of a part of a mixture: written out, normal if only a standard deviation is, else fixed */
export function lawOfPart({ law, sd, sd_percent }: MixedInput): Exclude<LawInput, MixtureInput> {
  if (law !== undefined) return law;
  if (sd !== undefined) return { law: 'normal', sd };
  return sd_percent === undefined ? { law: 'fixed' } : { law: 'normal', sd_percent };
}

function offsetOf(part: MixedInput | undefined): number {
  return part?.at ?? part?.at_percent ?? 0;
}

function mixtureInSi({ of }: MixtureInput, owner: LawOwner): MixtureLaw {
  const total = of.reduce((sum, { weight }) => sum + weight, 0);
  const parts = of.map((part, index): MixturePart => {
    const law = lawOfPart(part);
    const ofPart = { ...owner, path: [...owner.path, 'of', index] };
    return {
      weight: part.weight / total,
      at: amountInSi(part.at, part.at_percent, owner),
      law: isFixed(law) ? { law: 'fixed' } : plainLawInSi(law, ofPart),
    };
  });
  return { law: 'mixture', factor: 1, parts };
}

function plainLawInSi(law: Exclude<LawInput, MixtureInput>, owner: LawOwner): MixturePart['law'] {
  const si = (own: number | undefined, percent: number | undefined): number => amountInSi(own, percent, owner);
  switch (law.law) {
    case 'fixed':
      return { law: 'fixed' };
    case 'normal':
      return { law: 'normal', sd: si(law.sd, law.sd_percent) };
    case 'lognormal':
      if (!(owner.nominalSi > 0)) {
        owner.reading.fault(owner.path, 'another law where the nominal value is not above 0');
        return { law: 'fixed' };
      }
      return { law: 'lognormal', sd: si(law.sd, law.sd_percent) };
    case 'uniform':
      return { law: 'uniform', halfWidth: si(law.half_width, law.half_width_percent) };
    case 'triangular': {
      const peakFraction = (law.peak_percent ?? 50) / 100;
      return { law: 'triangular', halfWidth: si(law.half_width, law.half_width_percent), peakFraction };
    }
    case 'weibull':
      return { law: 'weibull', shape: law.shape, sd: si(law.sd, law.sd_percent) };
    case 'beta': {
      const { alpha, beta } = law;
      return { law: 'beta', alpha, beta, halfWidth: si(law.half_width, law.half_width_percent) };
    }
    case 'resampled': {
      const { key, path, reading } = owner;
      return { law: 'resampled', values: measuredColumn(law.file, law.column, key, path, reading) };
    }
    case 'truncated-normal': {
      const halfWidth = si(law.half_width, law.half_width_percent);
      if (!(halfWidth > 0)) {
        owner.reading.fault(owner.path, 'a truncated normal law with a half width above 0');
        return { law: 'fixed' };
      }
      return { law: 'truncated-normal', sd: si(law.sd, law.sd_percent), lower: -halfWidth, upper: halfWidth };
    }
  }
}

function amountInSi(
  own: number | undefined,
  percent: number | undefined,
  { key, nominalSi, relative }: LawOwner,
): number {
  if (own !== undefined) return differenceFromKey(key, own);
  return ((percent ?? 0) / 100) * (relative ? 1 : Math.abs(nominalSi));
}
