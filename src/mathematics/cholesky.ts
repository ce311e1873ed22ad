/** A pivot this small is a rounding error of a matrix of ones and correlations. */
const ROUNDING = 1e-12;

/**
 * Lower triangular factor L of a correlation matrix C, C = L L'.
 *
 *   L(i,j) = (C(i,j) - sum_{k<j} L(i,k) L(j,k)) / L(j,j),     L(i,i) = sqrt(C(i,i) - sum_{k<i} L(i,k)^2)
 *
 * Perfect correlations are allowed (a row that earlier rows fix entirely has a diagonal of 0).
 *
 * @param matrix symmetric, ones on the diagonal; only the lower triangle is read
 * @returns the rows of L, each up to its diagonal; null if no set of variables can be correlated so
 */
export function choleskyFactor(matrix: readonly (readonly number[])[]): readonly (readonly number[])[] | null {
  const factor: number[][] = [];
  for (const [i, row] of matrix.entries()) {
    const next: number[] = [];
    for (const [j, above] of factor.entries()) {
      const rest = (row[j] ?? 0) - dot(next, above, j);
      const pivot = above[j] ?? 0;
      if (pivot === 0 && Math.abs(rest) > Math.sqrt(ROUNDING)) return null;
      next.push(pivot === 0 ? 0 : rest / pivot);
    }
    const square = (row[i] ?? 0) - dot(next, next, i);
    if (square < -ROUNDING) return null;
    next.push(square < ROUNDING ? 0 : Math.sqrt(square));
    factor.push(next);
  }
  return factor;
}

function dot(one: readonly number[], other: readonly number[], length: number): number {
  let sum = 0;
  for (let k = 0; k < length; k++) sum += (one[k] ?? 0) * (other[k] ?? 0);
  return sum;
}
