/** One row per chain of bonds i-j-k-l. All arrays have the same length. */
export interface TorsionTable {
  /** Offsets 3*atom of i, j, k and l. */
  readonly i: Int32Array;
  readonly j: Int32Array;
  readonly k: Int32Array;
  readonly l: Int32Array;
  /** Coefficients of the one-, two- and threefold terms, kcal/mol. */
  readonly v1: Float64Array;
  readonly v2: Float64Array;
  readonly v3: Float64Array;
}
