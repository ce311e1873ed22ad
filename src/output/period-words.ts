import type { Study } from '../study/study.js';

const DAY_S = 86_400;

/** How people name the cycles of a study: days if a cycle is one by the clock. */
export interface PeriodWords {
  readonly one: string;
  readonly many: string;
}

export function periodWords({ duty }: Study): PeriodWords {
  return duty.kind === 'profile' && duty.cycleS === DAY_S
    ? { one: 'day', many: 'days' }
    : { one: 'cycle', many: 'cycles' };
}

/**
 * A stretch of cycles in words: `on day 180`, `in 180 days`, `last 30 days`.
 *
 * @param from first cycle, from 1
 * @param to last cycle
 */
export function windowWords(from: number, to: number, cycles: number, { one, many }: PeriodWords): string {
  if (from === to) return `on ${one} ${to}`;
  if (from === 1 && to === cycles) return `in ${cycles} ${many}`;
  return to === cycles ? `last ${to - from + 1} ${many}` : `${many} ${from} to ${to}`;
}
