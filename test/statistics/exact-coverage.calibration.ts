import { afterAll, describe, expect, it } from 'vitest';
import { binomialCdf } from '../../src/mathematics/binomial.js';
import {
  clopperPearson,
  type ProportionInterval,
  proportionEstimate,
  wilson,
} from '../../src/statistics/proportion-estimate.js';
import { quantileRanks } from '../../src/statistics/quantile-estimate.js';
import { type Coverage, renderCoverage, shareText } from './coverage-report.js';

// Coverage without chance: every count of events that can happen, weighted, over shares from 0.2 % to 99.8 %.

const found: Coverage[] = [];
afterAll(() => void process.stdout.write(renderCoverage(found)));

const SIZES = [32, 128, 512, 2048];
const SHARES = Array.from({ length: 499 }, (_, index) => (index + 1) / 500);

/** What the tool shows: Wilson's interval, or the exact one where events or others are few. */
function shown(events: number, n: number, confidence: number): ProportionInterval {
  const { lower, upper } = proportionEstimate(events, n, confidence);
  return { lower: lower ?? 0, upper: upper ?? 1 };
}

/** Exact coverage of an interval at each share. Both its ends grow with the count, so that the counts covering are a run. */
function coverages(interval: typeof wilson, n: number): readonly number[] {
  const intervals = Array.from({ length: n + 1 }, (_, events) => interval(events, n, 0.95));
  return SHARES.map((p) => {
    const first = intervals.findIndex(({ upper }) => upper >= p);
    const last = intervals.findLastIndex(({ lower }) => lower <= p);
    return first > last ? 0 : binomialCdf(last, n, p) - binomialCdf(first - 1, n, p);
  });
}

describe.each([
  // Law of the exact interval: never less than 95 %. Wilson's dips at the ends of the range (Brown, Cai & DasGupta 2001,
  // Statist. Sci. 16, 101-133: to 0.83 near p = 1 / (5.6 n)), which is why few events take the exact one.
  ['clopper-pearson', clopperPearson, 0.95],
  ['wilson', wilson, 0.83],
  ['as shown', shown, 0.92],
] as const)('%s', (method, interval, least) => {
  it.each(SIZES)('of %i banks', (n) => {
    const all = coverages(interval, n);
    const worst = Math.min(...all);
    const mean = all.reduce((sum, one) => sum + one, 0) / all.length;
    const at = SHARES[all.indexOf(worst)];
    const coverage = `mean ${shareText(mean)}, least ${shareText(worst)} at p = ${at}`;
    found.push({ method, setting: `${n} banks, p 0.002 to 0.998`, coverage });
    // The ends come from quantiles good to 1e-6.
    expect(worst).toBeGreaterThan(least - 1e-6);
    expect(mean).toBeGreaterThan(0.949);
  });
});

describe('order statistics', () => {
  it.each([0.05, 0.5, 0.95])('of the quantile %f', (p) => {
    const sizes = Array.from({ length: 2000 }, (_, index) => index + 1).filter(
      (n) => quantileRanks(n, p, 0.95) !== null,
    );
    const all = sizes.map((n) => {
      const ranks = quantileRanks(n, p, 0.95);
      return ranks === null ? 0 : binomialCdf(ranks.upper - 1, n, p) - binomialCdf(ranks.lower - 1, n, p);
    });
    const worst = Math.min(...all);
    const mean = all.reduce((sum, one) => sum + one, 0) / all.length;
    const at = sizes[all.indexOf(worst)];
    found.push({
      method: 'order-statistics',
      setting: `quantile ${p}, ${sizes[0]} to 2000 banks`,
      coverage: `mean ${shareText(mean)}, least ${shareText(worst)} of ${at}`,
    });
    expect(worst).toBeGreaterThanOrEqual(0.95);
  });
});
