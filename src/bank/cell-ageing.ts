import type { ModuleAgeing } from '../study/ageing-settings.js';
import { fadeAfter } from './fade-after.js';
import { CALENDAR_EXPONENT, calendarFactor } from './naumann-2018.js';
import { CYCLE_EXPONENT, cycleFactor } from './naumann-2020.js';
import { WANG_EXPONENT, wangFactor, wangThroughputAh } from './wang-2011.js';

/** What a cell went through in one cycle. */
export interface CellUse {
  readonly durationS: number;
  /** Charge through the cell, mean of both ways, over its capacity when new. */
  readonly equivalentCycles: number;
  /** Mean of its charge fraction over time. */
  readonly meanCharge: number;
  /** Largest less smallest charge fraction. */
  readonly depth: number;
  /** Mean charging current, while it was charged, over its capacity when new, 1/h. */
  readonly ratePerH: number;
  /** Mean over time. */
  readonly temperatureK: number;
}

/** Fade of a cell, fraction of its capacity when new, in the parts that go on by themselves. */
export interface CellFade {
  readonly calendar: number;
  readonly cycle: number;
}

/** A cell cannot lose more: no law holds that far, and none of the capacity would be left. */
const MOST_FADE = 0.8;

/**
 * Fade at the start of a course. Under `naumann` half of it is calendar, half cycle fade [own choice]: what is known of
 * a used module is what it has left, not what took it.
 */
export function initialFade({ law, initialFadeFraction }: ModuleAgeing): CellFade {
  const calendar = law === 'naumann' ? initialFadeFraction / 2 : 0;
  return { calendar, cycle: initialFadeFraction - calendar };
}

/** Fade of a cell after one more cycle; see the laws. Both parts go on from their own fade. */
export function fadeAfterCycle({ calendar, cycle }: CellFade, { law, rate }: ModuleAgeing, use: CellUse): CellFade {
  const { equivalentCycles, temperatureK } = use;
  if (law === 'wang-2011') {
    const factor = rate * wangFactor(temperatureK);
    return { calendar, cycle: fadeAfter(cycle, factor, WANG_EXPONENT, wangThroughputAh(equivalentCycles)) };
  }
  const ofTime = rate * calendarFactor(temperatureK, use.meanCharge);
  const ofCycles = rate * cycleFactor(use.ratePerH, use.depth);
  return {
    calendar: fadeAfter(calendar, ofTime, CALENDAR_EXPONENT, use.durationS),
    cycle: fadeAfter(cycle, ofCycles, CYCLE_EXPONENT, equivalentCycles),
  };
}

/** @returns capacity left of that at the start of the course, fraction */
export function capacityLeft({ calendar, cycle }: CellFade, { initialFadeFraction }: ModuleAgeing): number {
  return (1 - Math.min(MOST_FADE, calendar + cycle)) / (1 - initialFadeFraction);
}
