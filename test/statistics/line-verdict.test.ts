import { expect, test } from 'vitest';
import type { Estimate } from '../../src/statistics/estimate.js';
import { lineVerdict } from '../../src/statistics/line-verdict.js';

const between = (lower: number | null, upper: number | null): Estimate => ({
  estimate: lower,
  lower,
  upper,
  method: 'wilson',
  note: '',
  instances: 64,
});

test.each([
  ['at-most', 6, 4, 5.9, 'meets'],
  ['at-most', 6, 4, 6, 'meets'],
  ['at-most', 6, 4, 6.1, 'not decided'],
  ['at-most', 6, 6, 8, 'not decided'],
  ['at-most', 6, 6.1, 8, 'fails'],
  ['at-least', 6, 6.1, 8, 'meets'],
  ['at-least', 6, 6, 8, 'meets'],
  ['at-least', 6, 5.9, 8, 'not decided'],
  ['at-least', 6, 4, 6, 'not decided'],
  ['at-least', 6, 4, 5.9, 'fails'],
  ['at-most', 0, 0, 0, 'meets'],
  ['at-least', 0, 0, 0, 'meets'],
] as const)('a line %s %d and an interval from %d to %d: %s', (bound, limit, lower, upper, verdict) => {
  expect(lineVerdict(between(lower, upper), bound, limit)).toBe(verdict);
});

test('an estimate without an interval decides nothing', () => {
  expect(lineVerdict(between(null, null), 'at-most', 6)).toBe('not decided');
  expect(lineVerdict(between(null, null), 'at-least', 6)).toBe('not decided');
});
