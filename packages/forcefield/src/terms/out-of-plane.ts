/** One row per Wilson angle: bond j-l against the plane i-j-k, `j` the centre; three rows a centre with three neighbours. */
export interface OutOfPlaneTable {
  /** Offsets 3*atom of i, j, k and l. */
  readonly i: Int32Array;
  readonly j: Int32Array;
  readonly k: Int32Array;
  readonly l: Int32Array;
  /** Force constants, md angstrom/rad^2. */
  readonly force: Float64Array;
}
