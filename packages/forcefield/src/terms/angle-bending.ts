/**
 * Angle bending: a cubic in the deviation, and a cosine at centres that are linear by their type.
 *
 *   E(ijk) = 0.043844 (k_ijk / 2) dtheta^2 (1 + cb dtheta),   dtheta = theta_ijk - theta0_ijk,   cb = -0.4 / radian = -0.006981 / degree
 *   E(ijk) = 143.9325 k_ijk (1 + cos theta_ijk)                                              at a linear centre
 *
 * dtheta in degrees, k in md angstrom/rad^2, E in kcal/mol; 0.043844 is 143.9325 (pi/180)^2.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), equations 3 and 4.
 */

const KCAL_PER_MDYN_ANGSTROM = 143.9325;
const DEGREES = 180 / Math.PI;
const KCAL_PER_DEGREE_SQUARED = KCAL_PER_MDYN_ANGSTROM / (DEGREES * DEGREES);
const CUBIC = -0.4 / DEGREES;

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

/** Energy of one angle in kcal/mol, from its deviation in degrees and its force constant in md angstrom/rad^2. */
export function angleBending(dtheta: number, force: number): number {
  return 0.5 * KCAL_PER_DEGREE_SQUARED * force * dtheta * dtheta * (1 + CUBIC * dtheta);
}

/** Energy of one angle at a linear centre in kcal/mol, from its cosine and its force constant in md angstrom/rad^2. */
export function linearAngleBending(cosine: number, force: number): number {
  return KCAL_PER_MDYN_ANGSTROM * force * (1 + cosine);
}

/**
 * The angle in radians, 0 to pi, whose cosine and (positive) sine are given. The arc cosine is fast but loses its digits near a
 * straight angle, where the sine has them.
 */
export function angleFrom(cosine: number, sine: number): number {
  return Math.abs(cosine) < 0.99 ? Math.acos(cosine) : Math.atan2(sine, cosine);
}

/** Adds the gradient (kcal/mol/angstrom) of every angle to `gradient` and returns the energy (kcal/mol). */
export function addAngleBending(table: AngleBendingTable, x: Float64Array, gradient: Float64Array): number {
  const { angle, force, linear } = table;
  let energy = 0;
  for (let n = 0; n < angle.length; n++) {
    const i = table.i[n], j = table.j[n], k = table.k[n];

    // u, v from the centre to both ends, w = u x v of length |u| |v| sin theta
    const ux = x[i] - x[j], uy = x[i + 1] - x[j + 1], uz = x[i + 2] - x[j + 2];
    const vx = x[k] - x[j], vy = x[k + 1] - x[j + 1], vz = x[k + 2] - x[j + 2];
    const wx = uy * vz - uz * vy, wy = uz * vx - ux * vz, wz = ux * vy - uy * vx;
    const u2 = ux * ux + uy * uy + uz * uz, v2 = vx * vx + vy * vy + vz * vz;
    // 1 / |u| |v|; two atoms on one spot have no direction
    const perUV = 1 / Math.sqrt(u2 * v2 + 1e-24);
    const cosine = (ux * vx + uy * vy + uz * vz) * perUV;

    // -dE/dcos
    let slope: number;
    if (linear[n]) {
      energy += linearAngleBending(cosine, force[n]);
      slope = -KCAL_PER_MDYN_ANGSTROM * force[n];
    } else {
      // a straight angle has no defined direction of bending: its sine is kept away from zero, its force vanishes there
      const sine = Math.sqrt(wx * wx + wy * wy + wz * wz) * perUV + 1e-12;
      const dtheta = DEGREES * angleFrom(cosine, sine) - angle[n];
      energy += angleBending(dtheta, force[n]);
      slope = (KCAL_PER_DEGREE_SQUARED * DEGREES * force[n] * dtheta * (1 + 1.5 * CUBIC * dtheta)) / sine;
    }

    // -dcos/du = u x w / u^2 |u| |v|: the cross product keeps its digits near a straight angle
    const toI = slope * perUV * perUV * perUV * v2, toK = slope * perUV * perUV * perUV * u2;
    const gix = toI * (uy * wz - uz * wy), giy = toI * (uz * wx - ux * wz), giz = toI * (ux * wy - uy * wx);
    const gkx = toK * (wy * vz - wz * vy), gky = toK * (wz * vx - wx * vz), gkz = toK * (wx * vy - wy * vx);
    gradient[i] += gix; gradient[i + 1] += giy; gradient[i + 2] += giz;
    gradient[k] += gkx; gradient[k + 1] += gky; gradient[k + 2] += gkz;
    gradient[j] -= gix + gkx; gradient[j + 1] -= giy + gky; gradient[j + 2] -= giz + gkz;
  }
  return energy;
}
