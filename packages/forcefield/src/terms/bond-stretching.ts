/**
 * Bond stretching: a quartic well, the fourth-order expansion of a Morse curve.
 *
 *   E(ij) = 143.9325 (k_ij / 2) dr^2 (1 + cs dr + (7/12) cs^2 dr^2),   dr = r_ij - r0_ij,   cs = -2 / angstrom
 *
 * dr in angstrom, k in md/angstrom, E in kcal/mol.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), equation 2.
 */

const KCAL_PER_MDYN_ANGSTROM = 143.9325;
const CUBIC = -2;
const QUARTIC = (7 / 12) * CUBIC * CUBIC;

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

/** Energy of one bond in kcal/mol, from its deviation in angstrom and its force constant in md/angstrom. */
export function bondStretching(dr: number, force: number): number {
  return 0.5 * KCAL_PER_MDYN_ANGSTROM * force * dr * dr * (1 + CUBIC * dr + QUARTIC * dr * dr);
}

/** Adds the gradient (kcal/mol/angstrom) of every bond to `gradient` and returns the energy (kcal/mol). */
export function addBondStretching(table: BondStretchingTable, x: Float64Array, gradient: Float64Array): number {
  const { length, force } = table;
  let energy = 0;
  for (let n = 0; n < length.length; n++) {
    const i = table.i[n], j = table.j[n];
    const dx = x[i] - x[j], dy = x[i + 1] - x[j + 1], dz = x[i + 2] - x[j + 2];
    // two atoms on one spot have no direction to part in
    const r = Math.sqrt(dx * dx + dy * dy + dz * dz + 1e-24);
    const dr = r - length[n];
    energy += bondStretching(dr, force[n]);

    const slope = (KCAL_PER_MDYN_ANGSTROM * force[n] * dr * (1 + 1.5 * CUBIC * dr + 2 * QUARTIC * dr * dr)) / r;
    gradient[i] += slope * dx; gradient[i + 1] += slope * dy; gradient[i + 2] += slope * dz;
    gradient[j] -= slope * dx; gradient[j + 1] -= slope * dy; gradient[j + 2] -= slope * dz;
  }
  return energy;
}
