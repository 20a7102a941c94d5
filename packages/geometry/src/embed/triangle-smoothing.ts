/**
 * Tightens distance bounds until every triple of atoms obeys the triangle inequality: u(ij) <= u(ik) + u(kj) and l(ij) >= l(ik) - u(kj).
 *
 * Source: G. M. Crippen, T. F. Havel, Distance Geometry and Molecular Conformation, Research Studies Press, Taunton (1988), section 5.3;
 * the shortest-path form with one pass over k is A. W. M. Dress and T. F. Havel, Discrete Appl. Math. 19, 129 (1988).
 */

/** Square matrices of n x n distances (angstrom), both halves filled. */
export interface DistanceBounds {
  readonly size: number;
  readonly lower: Float64Array;
  readonly upper: Float64Array;
}

/**
 * Smooths in place. Where a lower bound passes its upper one (estimates that contradict each other in a strained ring),
 * both are set to their mean. Returns the largest such excess, angstrom.
 */
export function smoothTriangles({ size: n, lower, upper }: DistanceBounds): number {
  for (let k = 0; k < n; k++) {
    const rowK = k * n;
    for (let i = 0; i < n; i++) {
      if (i === k) continue;
      const rowI = i * n;
      const u = upper[rowI + k];
      const l = lower[rowI + k];
      for (let j = 0; j < i; j++) {
        const through = u + upper[rowK + j];
        if (upper[rowI + j] > through) upper[rowI + j] = upper[j * n + i] = through;
        const least = Math.max(l - upper[rowK + j], lower[rowK + j] - u);
        if (lower[rowI + j] < least) lower[rowI + j] = lower[j * n + i] = least;
      }
    }
  }
  let excess = 0;
  for (let i = 0; i < n; i++)
    for (let j = 0; j < i; j++) {
      const over = lower[i * n + j] - upper[i * n + j];
      if (over <= 0) continue;
      excess = Math.max(excess, over);
      const mean = (lower[i * n + j] + upper[i * n + j]) / 2;
      lower[i * n + j] = lower[j * n + i] = upper[i * n + j] = upper[j * n + i] = mean;
    }
  return excess;
}
