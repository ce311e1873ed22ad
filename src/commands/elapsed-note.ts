import type { Study } from '../study/study.js';
import type { TwinFacts } from './trial.js';

const DAY_S = 86_400;

/** @returns how long the cycles of the twins take where a charge may end its phase early, null where cycles are of fixed length */
export function elapsedNote({ duty, cycles, candidates }: Study, twins: readonly TwinFacts[]): string | null {
  if (!duty.parts.some((part) => part.cycles.flat().some(({ endsWhenCharged }) => endsWhenCharged))) return null;
  const keysOf = new Map<string, string[]>();
  for (const [index, { elapsedS }] of twins.entries()) {
    const days = (elapsedS / DAY_S).toFixed(1);
    keysOf.set(days, [...(keysOf.get(days) ?? []), candidates[index]?.key ?? '']);
  }
  const times = [...keysOf].map(([days, keys]) => `${days} days (${keys.join(', ')})`).join(', ');
  return (
    `cycles are not days: charge: to-full ends its phase when the charger is done; ${cycles} cycles of the twin take ` +
    `${times}; ageing and every_days of upkeep go by that time; for cycles of a fixed length write charge_for_h in its ` +
    'place, or a profile'
  );
}
