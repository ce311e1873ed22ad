import { sampleModules } from '../../src/sampling/sample-modules.js';
import type { ModuleParameters, Study } from '../../src/study/study.js';

/** Two-sided normal score exceeded once in 10,000: with the seed fixed, a test inside this band stays inside it. */
export const BAND = 3.89;

export const mean = (values: readonly number[]): number =>
  values.reduce((sum, value) => sum + value, 0) / values.length;

export const sd = (values: readonly number[]): number => {
  const middle = mean(values);
  return Math.sqrt(values.reduce((sum, value) => sum + (value - middle) ** 2, 0) / (values.length - 1));
};

/** Product-moment correlation. */
export function correlation(one: readonly number[], other: readonly number[]): number {
  const [a, b] = [mean(one), mean(other)];
  const together = one.reduce((sum, value, k) => sum + (value - a) * ((other[k] ?? Number.NaN) - b), 0);
  return together / ((one.length - 1) * sd(one) * sd(other));
}

/** Ranks from 1, for a sample without ties. */
export function ranks(values: readonly number[]): number[] {
  const order = values.map((_, k) => k).sort((i, j) => (values[i] ?? 0) - (values[j] ?? 0));
  const rank = new Array<number>(values.length).fill(0);
  order.forEach((k, place) => {
    rank[k] = place + 1;
  });
  return rank;
}

/** Largest distance between the empirical and a given distribution function (Kolmogorov and Smirnov). */
export function kolmogorovDistance(values: readonly number[], cdf: (x: number) => number): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted.reduce((largest, value, k) => {
    const expected = cdf(value);
    return Math.max(largest, expected - k / sorted.length, (k + 1) / sorted.length - expected);
  }, 0);
}

/** Distance exceeded once in 10,000 by a sample of n: sqrt(ln(2 / 1e-4) / 2 / n) (Massart 1990, Ann. Probab. 18, 1269). */
export const kolmogorovBand = (n: number): number => Math.sqrt(Math.log(2e4) / 2 / n);

/** All modules of the instances 1 to `count`, instance by instance. */
export function modulesOf(study: Study, count: number): ModuleParameters[] {
  return Array.from({ length: count }, (_, k) => [...sampleModules(study, k + 1).values()]).flat();
}
