/**
 * Stretch-bend coupling: opening an angle softens the two bonds that form it.
 *
 *   E(ijk) = 2.51210 (k_ijk dr_ij + k_kji dr_kj) dtheta
 *
 * dr in angstrom, dtheta in degrees, k in md/rad, E in kcal/mol. Linear centres have no such term.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), equation 5.
 */

import { angleFrom } from './angle-bending.js';

const KCAL_PER_MDYN_RADIAN = 2.5121;
const DEGREES = 180 / Math.PI;

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

/** Energy of one coupling in kcal/mol, from deviations in angstrom and degrees. */
export function stretchBend(dr_ij: number, dr_kj: number, dtheta: number, force_ij: number, force_kj: number): number {
  return KCAL_PER_MDYN_RADIAN * (force_ij * dr_ij + force_kj * dr_kj) * dtheta;
}

/** Adds the gradient (kcal/mol/angstrom) of every coupling to `gradient` and returns the energy (kcal/mol). */
export function addStretchBend(table: StretchBendTable, x: Float64Array, gradient: Float64Array): number {
  const { length_ij, length_kj, angle, force_ij, force_kj } = table;
  let energy = 0;
  for (let n = 0; n < angle.length; n++) {
    const i = table.i[n], j = table.j[n], k = table.k[n];

    // unit vectors u, v from the centre to both ends
    let ux = x[i] - x[j], uy = x[i + 1] - x[j + 1], uz = x[i + 2] - x[j + 2];
    let vx = x[k] - x[j], vy = x[k + 1] - x[j + 1], vz = x[k + 2] - x[j + 2];
    const r_ij = Math.sqrt(ux * ux + uy * uy + uz * uz + 1e-24), r_kj = Math.sqrt(vx * vx + vy * vy + vz * vz + 1e-24);
    const perU = 1 / r_ij, perV = 1 / r_kj;
    ux *= perU; uy *= perU; uz *= perU;
    vx *= perV; vy *= perV; vz *= perV;

    // a straight angle has no defined direction of bending: its sine is kept away from zero, its force vanishes there
    const wx = uy * vz - uz * vy, wy = uz * vx - ux * vz, wz = ux * vy - uy * vx;
    const sine = Math.sqrt(wx * wx + wy * wy + wz * wz) + 1e-12;
    const dtheta = DEGREES * angleFrom(ux * vx + uy * vy + uz * vz, sine) - angle[n];
    const dr_ij = r_ij - length_ij[n], dr_kj = r_kj - length_kj[n];
    energy += stretchBend(dr_ij, dr_kj, dtheta, force_ij[n], force_kj[n]);

    // chain rule: dE/dr along u and v, dE/dtheta along the two in-plane normals u x (u x v) and (u x v) x v
    const alongU = KCAL_PER_MDYN_RADIAN * force_ij[n] * dtheta;
    const alongV = KCAL_PER_MDYN_RADIAN * force_kj[n] * dtheta;
    const bend = (KCAL_PER_MDYN_RADIAN * DEGREES * (force_ij[n] * dr_ij + force_kj[n] * dr_kj)) / sine;
    const toI = bend * perU, toK = bend * perV;

    const gix = alongU * ux + toI * (uy * wz - uz * wy), giy = alongU * uy + toI * (uz * wx - ux * wz), giz = alongU * uz + toI * (ux * wy - uy * wx);
    const gkx = alongV * vx + toK * (wy * vz - wz * vy), gky = alongV * vy + toK * (wz * vx - wx * vz), gkz = alongV * vz + toK * (wx * vy - wy * vx);
    gradient[i] += gix; gradient[i + 1] += giy; gradient[i + 2] += giz;
    gradient[k] += gkx; gradient[k + 1] += gky; gradient[k + 2] += gkz;
    gradient[j] -= gix + gkx; gradient[j + 1] -= giy + gky; gradient[j + 2] -= giz + gkz;
  }
  return energy;
}
