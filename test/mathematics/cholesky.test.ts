import { expect, test } from 'vitest';
import { choleskyFactor } from '../../src/mathematics/cholesky.js';

test('two variables give the rows (1) and (rho, sqrt(1 - rho^2)), by hand', () => {
  expect(
    choleskyFactor([
      [1, 0.6],
      [0.6, 1],
    ]),
  ).toEqual([[1], [0.6, 0.8]]);
});

test('the factor times its transpose is the matrix', () => {
  const matrix = [
    [1, -0.7, 0.2, 0],
    [-0.7, 1, 0.1, 0.3],
    [0.2, 0.1, 1, -0.4],
    [0, 0.3, -0.4, 1],
  ];
  const factor = choleskyFactor(matrix);
  expect(factor).not.toBeNull();
  matrix.forEach((row, i) => {
    row.forEach((entry, j) => {
      const product = (factor?.[i] ?? []).reduce((sum, value, k) => sum + value * (factor?.[j]?.[k] ?? 0), 0);
      expect(product).toBeCloseTo(entry, 14);
    });
  });
});

test('perfect correlation is allowed', () => {
  expect(
    choleskyFactor([
      [1, -1, 0.5],
      [-1, 1, -0.5],
      [0.5, -0.5, 1],
    ]),
  ).toEqual([[1], [-1, 0], [0.5, 0, Math.sqrt(0.75)]]);
});

test('correlations that contradict each other have no factor', () => {
  // Three variables cannot all be correlated by less than -1/2 (the determinant 1 + 2 r^3 - 3 r^2 is negative).
  const all = (r: number) => [
    [1, r, r],
    [r, 1, r],
    [r, r, 1],
  ];
  expect(choleskyFactor(all(-0.51))).toBeNull();
  expect(choleskyFactor(all(-0.5))).not.toBeNull();
  // The first two are one variable, so the third cannot tell them apart.
  expect(
    choleskyFactor([
      [1, 1, 0.5],
      [1, 1, 0.4],
      [0.5, 0.4, 1],
    ]),
  ).toBeNull();
});

test('no variables have an empty factor', () => {
  expect(choleskyFactor([])).toEqual([]);
});
