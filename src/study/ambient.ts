import type { Origin } from './origin.js';
import type { DutySegment } from './study.js';
import { inUnitOfKey, siFromKey } from './units.js';

/** Ambient temperature unless a study says otherwise, degC: that of all data of cells. */
export const DEFAULT_AMBIENT_DEGC = 25;

/** @returns the ambient temperature of a segment; nothing for the default, so that a study without cold stays as it is */
export function ambientOf(ambientDegC: number | undefined): Pick<DutySegment, 'ambientK'> {
  if (ambientDegC === undefined || ambientDegC === DEFAULT_AMBIENT_DEGC) return {};
  return { ambientK: siFromKey('ambient_degC', ambientDegC) };
}

/** What is told of the ambient temperatures of a part: the one there is, or the coldest and the warmest. */
export function ambientOrigin(part: string, segments: readonly DutySegment[]): Origin {
  let [coldest, warmest] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (const { ambientK } of segments) {
    const degC = ambientK === undefined ? DEFAULT_AMBIENT_DEGC : inUnitOfKey('ambient_degC', ambientK);
    coldest = Math.min(coldest, degC);
    warmest = Math.max(warmest, degC);
  }
  const [low, high] = [coldest, warmest].map((degC) => String(Number(degC.toPrecision(6))));
  return {
    path: `${part}.ambient_degC`,
    value: low === high ? `${low}` : `${low} to ${high}`,
    unit: 'degC',
    source: segments.every(({ ambientK }) => ambientK === undefined) ? 'default' : 'study',
  };
}
