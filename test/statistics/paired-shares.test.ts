import { expect, test } from 'vitest';
import { pairedShares } from '../../src/statistics/paired-shares.js';
import { proportionEstimate } from '../../src/statistics/proportion-estimate.js';

test('shares count on which instances each candidate has less, and ties', () => {
  // By hand: three below 0, two at 0, one above.
  const shares = pairedShares({ values: Float64Array.of(-3, -0.5, 0, 2, -1, 0), blocks: null }, 0, 0.95);
  expect(shares.firstLess).toEqual(proportionEstimate(3, 6, 0.95));
  expect(shares.tie).toEqual(proportionEstimate(2, 6, 0.95));
  expect(shares.secondLess).toEqual(proportionEstimate(1, 6, 0.95));
});

test('a difference up to the stated width is a tie', () => {
  const shares = pairedShares({ values: Float64Array.of(-0.2, -0.1, 0.1, 0.2, 0.3), blocks: null }, 0.1, 0.95);
  expect(shares.firstLess.estimate).toBe(0.2);
  expect(shares.tie.estimate).toBe(0.4);
  expect(shares.secondLess.estimate).toBe(0.4);
});

test('no instances leave all three not estimable', () => {
  const { firstLess, tie, secondLess } = pairedShares({ values: new Float64Array(), blocks: null }, 0, 0.95);
  for (const share of [firstLess, tie, secondLess]) expect(share.note).toBe('not estimable from 0');
});
