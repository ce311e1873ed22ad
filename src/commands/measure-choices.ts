import { MEASURES } from '../measures/registry.js';
import type { MeasureChoice } from '../study/acceptance.js';

/** What an acceptance line may name; the study room may not know the registry, so it is handed this. */
export function measureChoices(): readonly MeasureChoice[] {
  return MEASURES.filter(({ statistics }) => statistics.length > 0).map(({ name, unit, statistics }) => ({
    name,
    unit,
    statistics,
    // The last statistic of an amount is its unfavourable tail, that of an event its only one.
    defaultStatistic: statistics[statistics.length - 1] ?? 'mean',
  }));
}
