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
  /** For each pair of blocks of a column, rows r >= s, the offset in `values` of the block that their product is taken from. */
  readonly target: Int32Array;
}

/** A matrix, or its factor, in the places that a pattern gives: 9 values a block by rows, the diagonal blocks first. */
export interface BlockMatrix {
  readonly pattern: BlockPattern;
  readonly values: Float64Array;
}

/** The pattern of the factor of a matrix in which `couplings` (pairs of atoms, flat) have a block. */
export function blockPattern(atomCount: number, couplings: ArrayLike<number>): BlockPattern {
  // row i has bit j set while i and j are coupled and neither is eliminated
  const words = (atomCount + 31) >> 5;
  const coupled = new Int32Array(atomCount * words);
  for (let n = 0; n < couplings.length; n += 2) {
    const i = couplings[n],
      j = couplings[n + 1];
    if (i === j) continue;
    coupled[i * words + (j >> 5)] |= 1 << (j & 31);
    coupled[j * words + (i >> 5)] |= 1 << (i & 31);
  }
  const degree = Int32Array.from({ length: atomCount }, (_, i) => bitCount(coupled, i * words, words));
  const atomAt = new Int32Array(atomCount);
  const positionOf = new Int32Array(atomCount).fill(-1);
  const columns: number[][] = [];
  for (let p = 0; p < atomCount; p++) {
    let least = -1;
    for (let i = 0; i < atomCount; i++) if (positionOf[i] < 0 && (least < 0 || degree[i] < degree[least])) least = i;
    atomAt[p] = least;
    positionOf[least] = p;
    const rest = bitsOf(coupled, least * words, words);
    columns.push(rest);
    for (const i of rest) {
      for (let w = 0; w < words; w++) coupled[i * words + w] |= coupled[least * words + w];
      coupled[i * words + (i >> 5)] &= ~(1 << (i & 31));
      coupled[i * words + (least >> 5)] &= ~(1 << (least & 31));
      degree[i] = bitCount(coupled, i * words, words);
    }
  }

  const start = new Int32Array(atomCount + 1);
  columns.forEach((column, p) => {
    start[p + 1] = start[p] + column.length;
  });
  const row = new Int32Array(start[atomCount]);
  columns.forEach((column, p) => {
    row.set(Int32Array.from(column, (i) => positionOf[i]).sort(), start[p]);
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
          target[at++] = 9 * row[s];
          continue;
        }
        while (row[n] < row[r]) n++;
        target[at++] = 9 * (atomCount + n);
      }
    }
  return { atomCount, atomAt, positionOf, start, row, target };
}

/** How many bits are set in `words` words of `bits` from `at` on. */
function bitCount(bits: Int32Array, at: number, words: number): number {
  let count = 0;
  for (let w = at; w < at + words; w++) for (let word = bits[w]; word !== 0; word &= word - 1) count++;
  return count;
}

/** Which of them are set, ascending. */
function bitsOf(bits: Int32Array, at: number, words: number): number[] {
  const set: number[] = [];
  for (let w = 0; w < words; w++)
    for (let word = bits[at + w]; word !== 0; word &= word - 1) set.push(32 * w + 31 - Math.clz32(word & -word));
  return set;
}

/** A matrix of zeros in the pattern. */
export function blockMatrix(pattern: BlockPattern): BlockMatrix {
  return { pattern, values: new Float64Array(9 * (pattern.atomCount + pattern.row.length)) };
}

/**
 * Offset in `values` of the block of atoms i and j, and whether i is its row (else j is). Throws RangeError when the pattern has no such block.
 */
export function blockAt({ atomCount, positionOf, start, row }: BlockPattern, i: number, j: number): { offset: number; iIsRow: boolean } {
  const p = positionOf[i];
  const q = positionOf[j];
  if (p === q) return { offset: 9 * p, iIsRow: true };
  const low = Math.min(p, q);
  const high = Math.max(p, q);
  for (let n = start[low]; n < start[low + 1]; n++) if (row[n] === high) return { offset: 9 * (atomCount + n), iIsRow: p > q };
  throw new RangeError(`the pattern has no block for atoms ${i} and ${j}`);
}

/**
 * Replaces the matrix (its diagonal and what is below) by its Cholesky factor, in place: the diagonal blocks by the inverses of their lower
 * triangular factors.
 * A pivot that rounding has made smaller than `least` is raised to it.
 */
export function factorise({ pattern, values }: BlockMatrix, least: number): void {
  const { atomCount, start, target } = pattern;
  let at = 0;
  for (let p = 0; p < atomCount; p++) {
    const d = 9 * p;
    const l00 = Math.sqrt(Math.max(values[d], least));
    const l10 = values[d + 3] / l00;
    const l20 = values[d + 6] / l00;
    const l11 = Math.sqrt(Math.max(values[d + 4] - l10 * l10, least));
    const l21 = (values[d + 7] - l20 * l10) / l11;
    const l22 = Math.sqrt(Math.max(values[d + 8] - l20 * l20 - l21 * l21, least));
    const m00 = 1 / l00,
      m11 = 1 / l11,
      m22 = 1 / l22;
    const m10 = -l10 * m00 * m11;
    const m21 = -l21 * m11 * m22;
    const m20 = -(l20 * m00 + l21 * m10) * m22;
    values[d] = m00;
    values[d + 3] = m10;
    values[d + 4] = m11;
    values[d + 6] = m20;
    values[d + 7] = m21;
    values[d + 8] = m22;

    const from = 9 * (atomCount + start[p]),
      to = 9 * (atomCount + start[p + 1]);
    for (let r = from; r < to; r += 3) {
      const c0 = values[r],
        c1 = values[r + 1],
        c2 = values[r + 2];
      values[r] = c0 * m00;
      values[r + 1] = c0 * m10 + c1 * m11;
      values[r + 2] = c0 * m20 + c1 * m21 + c2 * m22;
    }
    for (let s = from; s < to; s += 9) {
      const s00 = values[s],
        s01 = values[s + 1],
        s02 = values[s + 2];
      const s10 = values[s + 3],
        s11 = values[s + 4],
        s12 = values[s + 5];
      const s20 = values[s + 6],
        s21 = values[s + 7],
        s22 = values[s + 8];
      for (let r = s; r < to; r += 9) {
        let b = target[at++];
        for (let row = r; row < r + 9; row += 3, b += 3) {
          const r0 = values[row],
            r1 = values[row + 1],
            r2 = values[row + 2];
          values[b] -= r0 * s00 + r1 * s01 + r2 * s02;
          values[b + 1] -= r0 * s10 + r1 * s11 + r2 * s12;
          values[b + 2] -= r0 * s20 + r1 * s21 + r2 * s22;
        }
      }
    }
  }
}

/** Solves A x = b with the factor of A: `b` and `x` in atom order, 3 values an atom; `work` of the same length is overwritten. */
export function solveFactorised({ pattern, values }: BlockMatrix, b: Float64Array, x: Float64Array, work: Float64Array): void {
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
    const y0 = values[d] * w0;
    const y1 = values[d + 3] * w0 + values[d + 4] * w1;
    const y2 = values[d + 6] * w0 + values[d + 7] * w1 + values[d + 8] * w2;
    work[w] = y0;
    work[w + 1] = y1;
    work[w + 2] = y2;
    for (let n = start[p], l = 9 * (atomCount + n); n < start[p + 1]; n++, l += 9) {
      const to = 3 * row[n];
      work[to] -= values[l] * y0 + values[l + 1] * y1 + values[l + 2] * y2;
      work[to + 1] -= values[l + 3] * y0 + values[l + 4] * y1 + values[l + 5] * y2;
      work[to + 2] -= values[l + 6] * y0 + values[l + 7] * y1 + values[l + 8] * y2;
    }
  }
  for (let p = atomCount - 1; p >= 0; p--) {
    const d = 9 * p,
      w = 3 * p;
    let y0 = work[w],
      y1 = work[w + 1],
      y2 = work[w + 2];
    for (let n = start[p], l = 9 * (atomCount + n); n < start[p + 1]; n++, l += 9) {
      const from = 3 * row[n];
      const v0 = work[from],
        v1 = work[from + 1],
        v2 = work[from + 2];
      y0 -= values[l] * v0 + values[l + 3] * v1 + values[l + 6] * v2;
      y1 -= values[l + 1] * v0 + values[l + 4] * v1 + values[l + 7] * v2;
      y2 -= values[l + 2] * v0 + values[l + 5] * v1 + values[l + 8] * v2;
    }
    const i = 3 * atomAt[p];
    work[w] = x[i] = values[d] * y0 + values[d + 3] * y1 + values[d + 6] * y2;
    work[w + 1] = x[i + 1] = values[d + 4] * y1 + values[d + 7] * y2;
    work[w + 2] = x[i + 2] = values[d + 8] * y2;
  }
}
