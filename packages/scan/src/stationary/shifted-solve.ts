/**
 * Solves (H + shift I) x = b for a dense symmetric H by Cholesky factorisation, row by row over flat arrays. A path down factors thousands of
 * matrices; the library's factorisation, which reads and writes each element through a call, took most of its time.
 *
 * Source: G. H. Golub, C. F. Van Loan, Matrix Computations, 4th ed., Johns Hopkins 2013, section 4.2.
 */

/**
 * Writes the solution into `x` and returns true, or returns false where H + shift I is not positive definite. H is row-major, n x n, and read in its
 * lower half; `factor` is scratch of n x n values.
 */
export function solveShifted(H: Float64Array, shift: number, b: Float64Array, x: Float64Array, factor: Float64Array): boolean {
  const n = b.length;
  for (let i = 0; i < n; i++) {
    const row = i * n;
    for (let j = 0; j <= i; j++) {
      const other = j * n;
      let sum = H[row + j];
      for (let k = 0; k < j; k++) sum -= factor[row + k] * factor[other + k];
      if (j < i) factor[row + j] = sum / factor[other + j];
      else {
        const pivot = sum + shift;
        if (!(pivot > 0)) return false;
        factor[row + i] = Math.sqrt(pivot);
      }
    }
  }
  // L y = b, then L^T x = y
  for (let i = 0; i < n; i++) {
    let sum = b[i];
    for (let k = 0; k < i; k++) sum -= factor[i * n + k] * x[k];
    x[i] = sum / factor[i * n + i];
  }
  for (let i = n - 1; i >= 0; i--) {
    x[i] /= factor[i * n + i];
    for (let k = 0; k < i; k++) x[k] -= factor[i * n + k] * x[i];
  }
  return true;
}
