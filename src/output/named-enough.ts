import type { Answers } from '../questions/answers.js';
import { LOOKS_CAVEAT } from './enough-text.js';

/** The looks of a run with the names of files; null if the number of banks was fixed. */
export function namedEnough({ enough }: Answers): Readonly<Record<string, unknown>> | null {
  if (enough === null) return null;
  const { schedule, looks, end } = enough;
  return {
    schedule,
    end,
    looks: looks.map(({ instances, watched, enough: isEnough }) => ({
      instances,
      enough: isEnough,
      watched: watched.map(({ candidate, measure, statistic, unit, halfWidth, wanted, narrow }) => ({
        candidate,
        measure,
        statistic,
        unit: unit.replace(/^%/, 'points'),
        half_width: halfWidth,
        wanted_half_width: wanted,
        narrow,
      })),
    })),
    caveat: LOOKS_CAVEAT,
  };
}
