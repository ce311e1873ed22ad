import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { solveConductances } from '../../src/mathematics/conductance-solve.js';
import {
  difference,
  type Fraction,
  fractionOf,
  numberOf,
  ONE,
  product,
  quotient,
  sum,
  ZERO,
} from './exact-fraction.js';

/** Inverse of the nodal matrix of a network in exact arithmetic, by Gauss and Jordan. */
function exactInverse(between: readonly number[][], toGround: readonly number[]): number[][] {
  const n = toGround.length;
  const rows: Fraction[][] = toGround.map((ground, i) => {
    const off = between[i].map((g, j) => (i === j ? ZERO : fractionOf(g)));
    const own = off.reduce(sum, fractionOf(ground));
    const matrix = off.map((g, j) => (i === j ? own : difference(ZERO, g)));
    return [...matrix, ...toGround.map((_, j) => (i === j ? ONE : ZERO))];
  });
  for (let k = 0; k < n; k++) {
    // Symmetric and positive definite: no pivot is 0.
    const pivot = rows[k].map((entry) => quotient(entry, rows[k][k]));
    rows.forEach((row, i) => {
      rows[i] = i === k ? pivot : row.map((entry, j) => difference(entry, product(row[k], pivot[j])));
    });
  }
  return rows.map((row) => row.slice(n).map(numberOf));
}

/** Node voltages for currents into the nodes, case by case. */
function solve(between: readonly number[][], toGround: readonly number[], currentA: readonly number[][]): number[][] {
  const n = toGround.length;
  const flat = Float64Array.from(currentA.flat());
  solveConductances(Float64Array.from(between.flat()), Float64Array.from(toGround), flat);
  return currentA.map((_, i) => [...flat.subarray(i * n, i * n + n)]);
}

/** The inverse of the nodal matrix: voltages for 1 A into each node. */
function inverse(between: readonly number[][], toGround: readonly number[]): number[][] {
  const unit = toGround.map((_, i) => toGround.map((_, j) => (i === j ? 1 : 0)));
  return solve(between, toGround, unit);
}

/** Largest relative difference of an entry. */
function worstEntry(found: number[][], exact: number[][]): number {
  return Math.max(...exact.flatMap((row, i) => row.map((entry, j) => Math.abs(found[i][j] / entry - 1))));
}

describe('solveConductances', () => {
  it('gives the resistances of a hand-solved network', () => {
    // By hand: nodes 1 and 2 tied by 1 S, 1 S from node 1 to ground, 2 S from node 2. G = [[2, -1], [-1, 3]], det 5.
    const found = inverse(
      [
        [0, 1],
        [1, 0],
      ],
      [1, 2],
    );
    expect(found.flat().map((ohm) => Math.round(1e12 * ohm) / 1e12)).toEqual([0.6, 0.2, 0.2, 0.4]);
  });

  it('reads nothing from the diagonal', () => {
    const plain = inverse([[0]], [0.25]);
    expect(inverse([[99]], [0.25])).toEqual(plain);
    expect(plain).toEqual([[4]]);
  });

  it('keeps every entry where 1000 S and 1 µS meet', () => {
    // Three nodes tied by 1000 S hang on shunts of 1 µS; the fourth is on the bus. Exact rational arithmetic beside.
    const [tie, leak] = [1000, 1e-6];
    const between = [
      [0, tie, 0, leak],
      [tie, 0, tie, 0],
      [0, tie, 0, leak],
      [leak, 0, leak, 0],
    ];
    const toGround = [leak, leak, leak, 100];
    expect(worstEntry(inverse(between, toGround), exactInverse(between, toGround))).toBeLessThan(1e-14);
  });

  it('keeps every entry of random networks of widely spread conductances', () => {
    // Bound: a few roundings for each of the n^2 sums, none of which cancels.
    const conductance = fc.oneof(
      fc.constant(0),
      fc.double({ min: -9, max: 11, noNaN: true }).map((exponent) => 10 ** exponent),
    );
    const network = fc.integer({ min: 1, max: 6 }).chain((n) =>
      fc.record({
        upper: fc.array(conductance, { minLength: (n * (n - 1)) / 2, maxLength: (n * (n - 1)) / 2 }),
        toGround: fc.array(conductance, { minLength: n, maxLength: n }).map((g) => g.map((each) => each + 1e-6)),
      }),
    );
    fc.assert(
      fc.property(network, ({ upper, toGround }) => {
        const n = toGround.length;
        const at = (i: number, j: number): number => upper[(i * (2 * n - i - 1)) / 2 + j - i - 1];
        const between = toGround.map((_, i) =>
          toGround.map((_, j) => (i === j ? 0 : at(Math.min(i, j), Math.max(i, j)))),
        );
        const found = inverse(between, toGround);
        const exact = exactInverse(between, toGround);
        for (let i = 0; i < n; i++) {
          for (let j = 0; j < n; j++) {
            if (exact[i][j] === 0) expect(found[i][j]).toBe(0);
            else expect(Math.abs(found[i][j] / exact[i][j] - 1)).toBeLessThan(1e-14);
          }
        }
      }),
      { seed: 20, numRuns: 150 },
    );
  });

  it('keeps the voltage between two nodes that hang on a shunt together', () => {
    // By hand: 1 A in at node 1 and out at node 2, tied by 1000 S: 1 mV, less what passes by the 1 µS shunts, 5e-10 of it.
    const tied = [
      [0, 1000],
      [1000, 0],
    ];
    const [[one, other]] = solve(tied, [1e-6, 1e-6], [[1, -1]]);
    expect(Math.abs((one - other) / 1e-3 - 1 + 5e-10)).toBeLessThan(1e-14);
  });

  it('names a node without a path to ground', () => {
    expect(() => inverse([[0]], [0])).toThrow('node 1 must have a path to ground');
  });
});
