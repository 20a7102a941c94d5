import { EigenvalueDecomposition, Matrix, solve } from 'ml-matrix';
import { expect, it } from 'vitest';
import { solveShifted } from './shifted-solve.js';

// against ml-matrix, a general library of linear algebra
it('solves as a general solver does, and tells a matrix that is not positive definite', () => {
  const n = 12;
  const value = (i: number, j: number): number => Math.sin(1 + Math.min(i, j) * 7.3 + Math.max(i, j) * 1.7) + (i === j ? 1 : 0);
  const H = Float64Array.from({ length: n * n }, (_, m) => value(Math.floor(m / n), m % n));
  const b = Float64Array.from({ length: n }, (_, i) => Math.cos(i));
  const lowest = Math.min(...new EigenvalueDecomposition(Matrix.from1DArray(n, n, H)).realEigenvalues);
  expect(lowest).toBeLessThan(0);

  const x = new Float64Array(n);
  const factor = new Float64Array(n * n);
  expect(solveShifted(H, -lowest - 0.01, b, x, factor)).toBe(false);
  expect(solveShifted(H, -lowest + 0.5, b, x, factor)).toBe(true);
  const shifted = Matrix.from1DArray(n, n, H).add(Matrix.eye(n).mul(-lowest + 0.5));
  const expected = solve(shifted, Matrix.columnVector(b)).to1DArray();
  for (let i = 0; i < n; i++) expect(x[i]).toBeCloseTo(expected[i], 10);
});
