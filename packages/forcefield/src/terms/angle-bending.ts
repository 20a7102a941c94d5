/** One row per angle i-j-k; `j` is the centre. All arrays have the same length. */
export interface AngleBendingTable {
  /** Offsets 3*atom of i, j and k. */
  readonly i: Int32Array;
  readonly j: Int32Array;
  readonly k: Int32Array;
  /** Reference angles, degrees. */
  readonly angle: Float64Array;
  /** Force constants, md angstrom/rad^2. */
  readonly force: Float64Array;
  /** 1 where the centre is linear by its atom type and the cosine form holds, else 0. */
  readonly linear: Uint8Array;
}
