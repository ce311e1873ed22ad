import type { View } from './evaluation.js';

/**
 * A condition that, once it has held without a break for `delayS`, does something to the switches.
 *
 * `holds` is false while the watch has nothing to do (a latch that is set is not set again). `fire` may make it false.
 */
export interface Watch {
  readonly delayS: number;
  readonly holds: (view: View) => boolean;
  readonly fire: (timeS: number, view: View) => void;
}

/** Times since when conditions hold, one entry per watch; null = does not hold. */
export type Since = (number | null)[];

/** Whether any condition has changed since `since` was brought up to date. */
export function anyChanged(watches: readonly Watch[], since: Since, view: View): boolean {
  return watches.some((watch, w) => watch.holds(view) !== (since[w] !== null));
}

/** The next instant at which a running delay ends; infinite if none runs. */
export function nextExpiryS(watches: readonly Watch[], since: Since): number {
  let next = Number.POSITIVE_INFINITY;
  watches.forEach((watch, w) => {
    const start = since[w];
    if (start !== null) next = Math.min(next, start + watch.delayS);
  });
  return next;
}

/**
 * Lets everything happen that is due at one instant, in rounds, each seeing the consequences of the one before.
 * Stops short after a round that `interrupts`.
 *
 * @returns whether anything happened
 * @throws Error if no end is reached: thresholds so close that a switch undoes itself at once
 */
export function settle(
  watches: readonly Watch[],
  since: Since,
  timeS: number,
  evaluate: () => View,
  interrupts: () => boolean,
): boolean {
  const mostRounds = 200;
  let switched = false;
  for (let round = 0; round < mostRounds; round++) {
    const view = evaluate();
    watches.forEach((watch, w) => {
      since[w] = watch.holds(view) ? (since[w] ?? timeS) : null;
    });
    let settled = true;
    watches.forEach((watch, w) => {
      const start = since[w];
      if (start === null || timeS < start + watch.delayS) return;
      watch.fire(timeS, view);
      since[w] = null;
      settled = false;
    });
    switched ||= !settled;
    if (settled || interrupts()) return switched;
  }
  throw new Error(`switching without end at ${timeS} s`);
}
