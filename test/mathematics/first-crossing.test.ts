import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { firstCrossing } from '../../src/mathematics/first-crossing.js';

/** Finds a crossing in [0, 1] and counts the looks at the function. */
function search(f: (x: number) => number, width: number): { readonly at: number; readonly looks: number } {
  let looks = 0;
  const counted = (x: number): number => {
    looks++;
    return f(x);
  };
  const bracket = firstCrossing(counted, { low: 0, lowValue: f(0), high: 1, highValue: f(1) }, width);
  expect(bracket.lowValue).toBe(f(bracket.low));
  expect(bracket.highValue).toBe(f(bracket.high));
  return { at: bracket.high, looks };
}

describe('firstCrossing', () => {
  it('ends at most one width above a rise through zero, on its upper side', () => {
    const shape = fc.record({
      root: fc.double({ min: 0.001, max: 0.999, noNaN: true }),
      power: fc.constantFrom(1, 3, 9, 1 / 3),
      steep: fc.double({ min: 1, max: 1e4, noNaN: true }),
      width: fc.constantFrom(1e-2, 1e-5, 1e-9),
    });
    fc.assert(
      fc.property(shape, ({ root, power, steep, width }) => {
        const f = (x: number): number => Math.tanh(steep * Math.sign(x - root) * Math.abs(x - root) ** power);
        const { at, looks } = search(f, width);
        expect(at).toBeGreaterThanOrEqual(root);
        expect(at - root).toBeLessThanOrEqual(width * (1 + 1e-6));
        // Every fourth look halves the bracket.
        expect(looks).toBeLessThanOrEqual(4 * Math.ceil(Math.log2(1 / width)) + 4);
      }),
      { seed: 41, numRuns: 300 },
    );
  });

  it('needs few looks at a smooth function', () => {
    // Bisection would take 30 looks for this width.
    const { at, looks } = search((x) => x * x - 0.3, 1e-9);
    expect(at).toBeCloseTo(Math.sqrt(0.3), 9);
    expect(looks).toBeLessThan(15);
  });

  it('takes a function that jumps', () => {
    const { at } = search((x) => (x < 0.37 ? -5 : 0.001), 1e-6);
    expect(at).toBeGreaterThanOrEqual(0.37);
    expect(at).toBeLessThanOrEqual(0.37 + 1e-6);
  });

  it('takes a value of exactly 0 as risen', () => {
    expect(search((x) => (x < 0.5 ? -1 : 0), 1e-6).at).toBeCloseTo(0.5, 5);
  });

  it('looks nowhere if the bracket is narrow enough already', () => {
    expect(search((x) => x - 0.5, 1)).toEqual({ at: 1, looks: 0 });
  });
});
