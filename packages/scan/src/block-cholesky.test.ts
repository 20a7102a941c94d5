import { CholeskyDecomposition, Matrix } from 'ml-matrix';
import { expect, test } from 'vitest';
import { blockAt, blockMatrix, blockPattern, factorise, solveFactorised } from './block-cholesky.js';

/** Numbers in (-1, 1) from a linear congruential generator (Park and Miller 1988). */
function generator(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 48271) % 2147483647;
    return (2 * state) / 2147483647 - 1;
  };
}

// reference: ml-matrix's dense Cholesky decomposition
test('a sparse factor solves as the dense one does', () => {
  const next = generator(7);
  for (const atomCount of [1, 2, 5, 14, 30]) {
    const couplings: number[] = [];
    // a chain with side groups and a ring closure: sparse, with fill
    for (let i = 1; i < atomCount; i++) couplings.push(i, Math.max(0, i - 1 - (i % 3)));
    if (atomCount > 5) couplings.push(0, atomCount - 1, 2, atomCount - 2);
    const matrix = blockMatrix(blockPattern(atomCount, couplings));
    const dense = Matrix.eye(3 * atomCount, 3 * atomCount).mul(0.1);
    for (let i = 0; i < atomCount; i++) for (let k = 0; k < 9; k += 4) matrix.values[blockAt(matrix.pattern, i, i).offset + k] = 0.1;
    for (let n = 0; n < couplings.length; n += 2) {
      const pair = [couplings[n], couplings[n + 1]];
      const v = Float64Array.from({ length: 6 }, next);
      for (let a = 0; a < 2; a++)
        for (let b = 0; b < 2; b++) {
          const { offset, iIsRow } = blockAt(matrix.pattern, pair[a], pair[b]);
          for (let k = 0; k < 3; k++)
            for (let m = 0; m < 3; m++) {
              const row = 3 * pair[a] + k;
              const column = 3 * pair[b] + m;
              const value = 5 * (v[3 * a + k] * v[3 * b + m]);
              dense.set(row, column, dense.get(row, column) + value);
              if (iIsRow) matrix.values[offset + 3 * k + m] += value;
            }
        }
    }
    factorise(matrix, 1e-12);
    const right = Float64Array.from({ length: 3 * atomCount }, next);
    const x = new Float64Array(3 * atomCount);
    solveFactorised(matrix, right, x, new Float64Array(3 * atomCount));
    const expected = new CholeskyDecomposition(dense).solve(Matrix.columnVector(right)).to1DArray();
    for (let n = 0; n < x.length; n++) expect(x[n]).toBeCloseTo(expected[n], 9);
  }
});

test('a tree is factored without fill', () => {
  const atomCount = 200;
  const couplings: number[] = [];
  for (let i = 1; i < atomCount; i++) couplings.push(i, Math.floor((i - 1) / 3));
  expect(blockPattern(atomCount, couplings).row.length).toBe(atomCount - 1);
});
