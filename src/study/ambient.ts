import type { DutySegment } from './study.js';
import { siFromKey } from './units.js';

/** Ambient temperature unless a study says otherwise, degC: that of all data of cells. */
export const DEFAULT_AMBIENT_DEGC = 25;

/** @returns the ambient temperature of a segment; nothing for the default, so that a study without cold stays as it is */
export function ambientOf(ambientDegC: number | undefined): Pick<DutySegment, 'ambientK'> {
  if (ambientDegC === undefined || ambientDegC === DEFAULT_AMBIENT_DEGC) return {};
  return { ambientK: siFromKey('ambient_degC', ambientDegC) };
}
