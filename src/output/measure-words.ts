import type { Measure, Statistic } from '../measures/measure.js';

/** A statistic in plain words; empty for the share of banks, which the unit names. */
export function statisticWords(measure: Measure, statistic: string): string {
  switch (statistic) {
    case 'mean':
    case 'median':
      return statistic;
    case 'percentile_5':
    case 'percentile_95':
      return `1 in 20 ${isUnfavourable(measure, statistic) ? 'worse' : 'better'}`;
    default:
      return '';
  }
}

/** Unit of a statistic in plain words. */
export function unitWords(measure: Measure): string {
  if (measure.kind === 'event') return '% of banks';
  return measure.unit.replace('/month', ' per month').replace('/day', ' per day');
}

/** The registry gives every amount the percentile of its unfavourable tail. */
function isUnfavourable(measure: Measure, statistic: Statistic): boolean {
  return measure.statistics.includes(statistic);
}
