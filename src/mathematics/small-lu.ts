/**
 * Factors a small square matrix into L U in its place, without exchanging rows: for matrices that need none, such as
 * those a diagonal scaling makes symmetric positive definite.
 *
 * @param matrix n x n, row by row; overwritten with U and, below the diagonal, the multipliers of L
 * @see Golub & Van Loan, Matrix Computations, ch. 3.2 (from memory)
 */
export function factorLu(matrix: Float64Array, n: number): void {
  for (let k = 0; k < n; k++) {
    const pivotRow = k * n;
    const inverse = 1 / matrix[pivotRow + k];
    for (let i = k + 1; i < n; i++) {
      const row = i * n;
      const share = matrix[row + k] * inverse;
      matrix[row + k] = share;
      for (let j = k + 1; j < n; j++) matrix[row + j] -= share * matrix[pivotRow + j];
    }
  }
}

/**
 * Solves L U x = b.
 *
 * @param factors from `factorLu`
 * @param x right-hand side; overwritten with the solution
 */
export function solveLu(factors: Float64Array, n: number, x: Float64Array): void {
  for (let i = 1; i < n; i++) {
    let sum = x[i];
    for (let j = 0; j < i; j++) sum -= factors[i * n + j] * x[j];
    x[i] = sum;
  }
  for (let i = n - 1; i >= 0; i--) {
    let sum = x[i];
    for (let j = i + 1; j < n; j++) sum -= factors[i * n + j] * x[j];
    x[i] = sum / factors[i * n + i];
  }
}
