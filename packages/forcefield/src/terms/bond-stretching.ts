/** One row per bond i-j. All arrays have the same length. */
export interface BondStretchingTable {
  /** Offsets 3*atom of i and j, so that the loop indexes coordinates without multiplying. */
  readonly i: Int32Array;
  readonly j: Int32Array;
  /** Reference lengths, angstrom. */
  readonly length: Float64Array;
  /** Force constants, md/angstrom. */
  readonly force: Float64Array;
}
