/**
 * Sparse Cholesky factorisation of a symmetric positive definite matrix of 3 x 3 blocks, one row and column of blocks an atom.
 *
 * Atoms are eliminated in the order of least degree (W. F. Tinney and J. W. Walker, Proc. IEEE 55, 1801 (1967)), which for a molecule's
 * graph keeps the factor nearly as sparse as the matrix. The pattern is worked out once; factoring and solving then run over flat arrays.
 */

/** Where the blocks of the factor stand. Positions count atoms in the order of elimination. */
export interface BlockPattern {
  readonly atomCount: number;
  /** Atom eliminated at each position, and position of each atom. */
  readonly atomAt: Int32Array;
  readonly positionOf: Int32Array;
  /** Blocks below the diagonal in column p: `start[p] .. start[p + 1] - 1`, ascending by `row` (a position). */
  readonly start: Int32Array;
  readonly row: Int32Array;
  /** For each pair of blocks of a column, rows r >= s, the block that their product is taken from: n for the off-diagonal block n, -1 - p for the diagonal block p. */
  readonly target: Int32Array;
}

/** A matrix, or its factor, in the places that a pattern gives: 9 values a diagonal block, then 9 an off-diagonal block, each by rows. */
export interface BlockMatrix {
  readonly pattern: BlockPattern;
  readonly diagonal: Float64Array;
  readonly below: Float64Array;
}

/** The pattern of the factor of a matrix in which `couplings` (pairs of atoms, flat) have a block. */
export function blockPattern(atomCount: number, couplings: ArrayLike<number>): BlockPattern {
  const coupled = Array.from({ length: atomCount }, () => new Set<number>());
  for (let n = 0; n < couplings.length; n += 2) {
    if (couplings[n] === couplings[n + 1]) continue;
    coupled[couplings[n]].add(couplings[n + 1]);
    coupled[couplings[n + 1]].add(couplings[n]);
  }
  const atomAt = new Int32Array(atomCount);
  const positionOf = new Int32Array(atomCount).fill(-1);
  const columns: Int32Array[] = [];
  for (let p = 0; p < atomCount; p++) {
    let least = -1;
    for (let i = 0; i < atomCount; i++) if (positionOf[i] < 0 && (least < 0 || coupled[i].size < coupled[least].size)) least = i;
    atomAt[p] = least;
    positionOf[least] = p;
    const rest = Int32Array.from(coupled[least]);
    columns.push(rest);
    for (const i of rest) {
      coupled[i].delete(least);
      for (const j of rest) if (j !== i) coupled[i].add(j);
    }
  }

  const start = new Int32Array(atomCount + 1);
  columns.forEach((column, p) => {
    start[p + 1] = start[p] + column.length;
  });
  const row = new Int32Array(start[atomCount]);
  columns.forEach((column, p) => {
    row.set(column.map((i) => positionOf[i]).sort(), start[p]);
  });

  let pairs = 0;
  for (const { length } of columns) pairs += (length * (length + 1)) / 2;
  const target = new Int32Array(pairs);
  let at = 0;
  for (let p = 0; p < atomCount; p++)
    for (let s = start[p]; s < start[p + 1]; s++) {
      // the rows below s in column p are among the rows of column row[s]: both ascend
      let n = start[row[s]];
      for (let r = s; r < start[p + 1]; r++) {
        if (r === s) {
          target[at++] = -1 - row[s];
          continue;
        }
        while (row[n] < row[r]) n++;
        target[at++] = n;
      }
    }
  return { atomCount, atomAt, positionOf, start, row, target };
}

/** A matrix of zeros in the pattern. */
export function blockMatrix(pattern: BlockPattern): BlockMatrix {
  return { pattern, diagonal: new Float64Array(9 * pattern.atomCount), below: new Float64Array(9 * pattern.row.length) };
}

/** Adds scale u v^T to the block of atoms i (rows, u) and j (columns, v), and its transpose to that of j and i; for i = j, u must equal v. */
export function addOuterProduct(
  { pattern, diagonal, below }: BlockMatrix,
  i: number,
  j: number,
  u: Float64Array,
  v: Float64Array,
  uAt: number,
  vAt: number,
  scale: number,
): void {
  const p = pattern.positionOf[i];
  const q = pattern.positionOf[j];
  let block = diagonal;
  let at = 9 * p;
  let rows = u,
    columns = v,
    rowsAt = uAt,
    columnsAt = vAt;
  if (p !== q) {
    const low = Math.min(p, q);
    const high = Math.max(p, q);
    let n = pattern.start[low];
    while (pattern.row[n] < high) n++;
    block = below;
    at = 9 * n;
    if (p < q) {
      rows = v;
      columns = u;
      rowsAt = vAt;
      columnsAt = uAt;
    }
  }
  for (let k = 0; k < 3; k++) {
    const value = scale * rows[rowsAt + k];
    block[at + 3 * k] += value * columns[columnsAt];
    block[at + 3 * k + 1] += value * columns[columnsAt + 1];
    block[at + 3 * k + 2] += value * columns[columnsAt + 2];
  }
}

/**
 * Replaces the matrix by its Cholesky factor, in place: the diagonal blocks by the inverses of their lower triangular factors.
 * A pivot that rounding has made smaller than `least` is raised to it.
 */
export function factorise({ pattern, diagonal, below }: BlockMatrix, least: number): void {
  const { atomCount, start, target } = pattern;
  let at = 0;
  for (let p = 0; p < atomCount; p++) {
    const d = 9 * p;
    const l00 = Math.sqrt(Math.max(diagonal[d], least));
    const l10 = diagonal[d + 3] / l00;
    const l20 = diagonal[d + 6] / l00;
    const l11 = Math.sqrt(Math.max(diagonal[d + 4] - l10 * l10, least));
    const l21 = (diagonal[d + 7] - l20 * l10) / l11;
    const l22 = Math.sqrt(Math.max(diagonal[d + 8] - l20 * l20 - l21 * l21, least));
    const m00 = 1 / l00,
      m11 = 1 / l11,
      m22 = 1 / l22;
    const m10 = -l10 * m00 * m11;
    const m21 = -l21 * m11 * m22;
    const m20 = -(l20 * m00 + l21 * m10) * m22;
    diagonal[d] = m00;
    diagonal[d + 3] = m10;
    diagonal[d + 4] = m11;
    diagonal[d + 6] = m20;
    diagonal[d + 7] = m21;
    diagonal[d + 8] = m22;

    const from = 9 * start[p],
      to = 9 * start[p + 1];
    for (let r = from; r < to; r += 3) {
      const c0 = below[r],
        c1 = below[r + 1],
        c2 = below[r + 2];
      below[r] = c0 * m00;
      below[r + 1] = c0 * m10 + c1 * m11;
      below[r + 2] = c0 * m20 + c1 * m21 + c2 * m22;
    }
    for (let s = from; s < to; s += 9) {
      const s00 = below[s],
        s01 = below[s + 1],
        s02 = below[s + 2];
      const s10 = below[s + 3],
        s11 = below[s + 4],
        s12 = below[s + 5];
      const s20 = below[s + 6],
        s21 = below[s + 7],
        s22 = below[s + 8];
      for (let r = s; r < to; r += 9) {
        const n = target[at++];
        const block = n < 0 ? diagonal : below;
        let b = n < 0 ? 9 * (-1 - n) : 9 * n;
        for (let row = r; row < r + 9; row += 3, b += 3) {
          const r0 = below[row],
            r1 = below[row + 1],
            r2 = below[row + 2];
          block[b] -= r0 * s00 + r1 * s01 + r2 * s02;
          block[b + 1] -= r0 * s10 + r1 * s11 + r2 * s12;
          block[b + 2] -= r0 * s20 + r1 * s21 + r2 * s22;
        }
      }
    }
  }
}

/** Solves A x = b with the factor of A: `b` and `x` in atom order, 3 values an atom; `work` of the same length is overwritten. */
export function solveFactorised({ pattern, diagonal, below }: BlockMatrix, b: Float64Array, x: Float64Array, work: Float64Array): void {
  const { atomCount, atomAt, start, row } = pattern;
  for (let p = 0; p < atomCount; p++) {
    const i = 3 * atomAt[p];
    work[3 * p] = b[i];
    work[3 * p + 1] = b[i + 1];
    work[3 * p + 2] = b[i + 2];
  }
  for (let p = 0; p < atomCount; p++) {
    const d = 9 * p,
      w = 3 * p;
    const w0 = work[w],
      w1 = work[w + 1],
      w2 = work[w + 2];
    const y0 = diagonal[d] * w0;
    const y1 = diagonal[d + 3] * w0 + diagonal[d + 4] * w1;
    const y2 = diagonal[d + 6] * w0 + diagonal[d + 7] * w1 + diagonal[d + 8] * w2;
    work[w] = y0;
    work[w + 1] = y1;
    work[w + 2] = y2;
    for (let n = start[p]; n < start[p + 1]; n++) {
      const to = 3 * row[n],
        l = 9 * n;
      work[to] -= below[l] * y0 + below[l + 1] * y1 + below[l + 2] * y2;
      work[to + 1] -= below[l + 3] * y0 + below[l + 4] * y1 + below[l + 5] * y2;
      work[to + 2] -= below[l + 6] * y0 + below[l + 7] * y1 + below[l + 8] * y2;
    }
  }
  for (let p = atomCount - 1; p >= 0; p--) {
    const d = 9 * p,
      w = 3 * p;
    let y0 = work[w],
      y1 = work[w + 1],
      y2 = work[w + 2];
    for (let n = start[p]; n < start[p + 1]; n++) {
      const from = 3 * row[n],
        l = 9 * n;
      const v0 = work[from],
        v1 = work[from + 1],
        v2 = work[from + 2];
      y0 -= below[l] * v0 + below[l + 3] * v1 + below[l + 6] * v2;
      y1 -= below[l + 1] * v0 + below[l + 4] * v1 + below[l + 7] * v2;
      y2 -= below[l + 2] * v0 + below[l + 5] * v1 + below[l + 8] * v2;
    }
    work[w] = diagonal[d] * y0 + diagonal[d + 3] * y1 + diagonal[d + 6] * y2;
    work[w + 1] = diagonal[d + 4] * y1 + diagonal[d + 7] * y2;
    work[w + 2] = diagonal[d + 8] * y2;
  }
  for (let p = 0; p < atomCount; p++) {
    const i = 3 * atomAt[p];
    x[i] = work[3 * p];
    x[i + 1] = work[3 * p + 1];
    x[i + 2] = work[3 * p + 2];
  }
}
