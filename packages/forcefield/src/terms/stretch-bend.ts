/** One row per coupled angle i-j-k; `j` is the centre. All arrays have the same length. */
export interface StretchBendTable {
  /** Offsets 3*atom of i, j, k, so that the loop indexes coordinates without multiplying. */
  readonly i: Int32Array;
  readonly j: Int32Array;
  readonly k: Int32Array;
  /** Reference lengths of i-j and k-j, angstrom. */
  readonly length_ij: Float64Array;
  readonly length_kj: Float64Array;
  /** Reference angle, degrees. */
  readonly angle: Float64Array;
  /** Force constants for i-j and k-j, md/rad. */
  readonly force_ij: Float64Array;
  readonly force_kj: Float64Array;
}
