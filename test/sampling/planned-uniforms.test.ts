import { describe, expect, test } from 'vitest';
import { plannedUniforms } from '../../src/sampling/planned-uniforms.js';
import { type DrawScope, uniformsOf } from '../../src/sampling/streams.js';
import type { SamplingPlan } from '../../src/study/sampling-plan.js';
import type { SobolColumn } from '../../src/study/study.js';
import { BAND, correlation, kolmogorovBand, kolmogorovDistance, mean } from './samples.js';

const MODULES = Array.from({ length: 32 }, (_, k) => `N${k + 1}`);
const COLUMNS: readonly SobolColumn[] = MODULES.map((module) => ({
  level: 'module',
  stock: 'newer',
  module,
  quantity: 'capacityAh',
}));
const BOUND: readonly SamplingPlan[] = ['latin-hypercube', 'sobol'];

interface Where {
  readonly plan?: SamplingPlan;
  readonly blockSize?: number;
  readonly block?: number;
}

const scopeOf = (block: number, index: number, module: string): DrawScope => ({
  seed: '4711',
  block,
  index,
  stock: 'newer',
  module,
  level: 'module',
  cell: null,
});

/** The draws of one quantity of one module for all instances of a block. */
function drawn(module: string, quantity: string, { plan = 'sobol', blockSize = 32, block = 1 }: Where = {}): number[] {
  const uniformsIn = plannedUniforms({ plan, blockSize, sobolColumns: COLUMNS });
  return Array.from({ length: blockSize }, (_, k) => uniformsIn(scopeOf(block, k + 1, module))(quantity));
}

const strata = (draws: readonly number[], count: number): number[] => draws.map((u) => Math.floor(u * count));

describe('the plan of independent draws', () => {
  test('takes every draw as it comes', () => {
    const scope = scopeOf(3, 7, 'N2');
    expect(drawn('N2', 'standbyA', { plan: 'independent', block: 3 })[6]).toBe(uniformsOf(scope)('standbyA'));
  });
});

describe.each(BOUND)('the plan %s', (plan) => {
  test.each([1, 2, 32, 4096])('draws once from each of %i strata, strictly between 0 and 1', (blockSize) => {
    for (const quantity of ['capacityAh', 'standbyA']) {
      const draws = drawn('N1', quantity, { plan, blockSize });
      expect(strata(draws, blockSize).sort((a, b) => a - b)).toEqual(draws.map((_, k) => k));
      expect(Math.min(...draws)).toBeGreaterThan(0);
      expect(Math.max(...draws)).toBeLessThan(1);
    }
  });

  test('is uniform at every place of a block, over the blocks', () => {
    for (const index of [1, 2, 32]) {
      const sample = Array.from({ length: 1000 }, (_, b) => drawnAt(plan, b + 1, index));
      expect(kolmogorovDistance(sample, (u) => u)).toBeLessThan(kolmogorovBand(sample.length));
    }
  });

  test('draws blocks that have nothing to do with each other', () => {
    const count = 2000;
    const sample = Array.from({ length: count }, (_, b) => drawnAt(plan, b + 1, 5));
    expect(Math.abs(correlation(sample.slice(1), sample.slice(0, -1)))).toBeLessThan(BAND / Math.sqrt(count - 1));
  });

  test('gives the same number whenever and beside whatever it is asked for', () => {
    const uniformOf = plannedUniforms({ plan, blockSize: 32, sobolColumns: COLUMNS })(scopeOf(2, 9, 'N4'));
    const first = uniformOf('capacityAh');
    uniformOf('standbyA');
    expect(uniformOf('capacityAh')).toBe(first);
    expect(drawn('N4', 'capacityAh', { plan, block: 2 })[8]).toBe(first);
  });

  test('correlates no two draws on average, and within a block no more than chance does', () => {
    // By hand: the correlation of two independent permutations of B strata has mean 0 and variance 1/(B - 1).
    const blocks = 200;
    for (const [one, other] of [
      [
        ['N1', 'standbyA'],
        ['N2', 'standbyA'],
      ],
      [
        ['N1', 'capacityAh'],
        ['N1', 'standbyA'],
      ],
    ] as const) {
      const pairs = Array.from({ length: blocks }, (_, b) => {
        const where = { plan, block: b + 1 };
        return correlation(drawn(one[0], one[1], where), drawn(other[0], other[1], where));
      });
      expect(Math.abs(mean(pairs))).toBeLessThan(BAND / Math.sqrt(31 * blocks));
      const square = mean(pairs.map((r) => r * r)) * 31;
      // The square of a normal has variance 2.
      expect(Math.abs(square - 1)).toBeLessThan(BAND * Math.sqrt(2 / blocks));
    }
  });
});

function drawnAt(plan: SamplingPlan, block: number, index: number): number {
  return plannedUniforms({ plan, blockSize: 32, sobolColumns: COLUMNS })(scopeOf(block, index, 'N3'))('capacityAh');
}

describe('draws with a column of Sobol', () => {
  test('have it under the plan sobol only', () => {
    const capacities = BOUND.map((plan) => drawn('N2', 'capacityAh', { plan }));
    expect(capacities[0]).not.toEqual(capacities[1]);
    const others = BOUND.map((plan) => drawn('N2', 'standbyA', { plan }));
    expect(others[0]).toEqual(others[1]);
  });

  test('of the first two columns fall once into each box of any shape, in every block', () => {
    // Sobol 1967: columns 1 and 2 are a (0, m, 2)-net in base 2; scrambling keeps it one (Owen 1995).
    for (const block of [1, 2, 3]) {
      const [across, up] = [drawn('N1', 'capacityAh', { block }), drawn('N2', 'capacityAh', { block })];
      for (let m = 0; m <= 5; m++) {
        const boxes = across.map((u, k) => `${Math.floor(u * 2 ** m)} ${Math.floor((up[k] ?? 0) * 2 ** (5 - m))}`);
        expect(new Set(boxes).size).toBe(32);
      }
    }
  });

  test('are as used, 32 columns at 64 points, correlated like independent ones but for one pair in a hundred', () => {
    const blocks = 30;
    const sums = new Map<string, { sum: number; squares: number }>();
    let strong = 0;
    for (let block = 1; block <= blocks; block++) {
      forEachPair(64, block, (pair, r) => {
        const { sum, squares } = sums.get(pair) ?? { sum: 0, squares: 0 };
        sums.set(pair, { sum: sum + r, squares: squares + r * r });
        if (Math.abs(r) > 0.5) strong++;
      });
    }
    // Coins decide the sign, so no pair is correlated over the blocks: 5.2 sd once in 1e-4 for 496 pairs.
    for (const { sum, squares } of sums.values()) expect(Math.abs(sum)).toBeLessThan(5.2 * Math.sqrt(squares));
    // By hand: independent draws have a mean square of 1/63, and pairs of the first two columns a smaller one.
    const square = mean([...sums.values()].map(({ squares }) => squares / blocks));
    expect(square * 63).toBeGreaterThan(0.8);
    expect(square * 63).toBeLessThan(1.2);
    // Two columns whose first digits are the same sum of digits of the place have |r| near 3/4. Among thousands of columns
    // that is one pair in 32 at 64 points, the chance that the other five digits agree.
    expect(strong / (496 * blocks)).toBeLessThan(1 / 32);
    expect(strong / (496 * blocks)).toBeGreaterThan(0);
  });
});

function forEachPair(blockSize: number, block: number, visit: (pair: string, r: number) => void): void {
  const draws = MODULES.map((module) => drawn(module, 'capacityAh', { blockSize, block }));
  draws.forEach((one, a) => {
    for (let b = 0; b < a; b++) visit(`${a} ${b}`, correlation(one, draws[b] ?? []));
  });
}
