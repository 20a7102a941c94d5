/**
 * Out-of-plane bending at a centre with three neighbours: a square well in each of its three Wilson angles.
 *
 *   E(ijk;l) = 0.043844 (k_ijkl / 2) chi^2
 *
 * chi, in degrees, is the angle between the bond j-l and the plane i-j-k; k in md angstrom/rad^2, E in kcal/mol;
 * 0.043844 is 143.9325 (pi/180)^2.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), equation 6; the angle after E. B. Wilson, J. C. Decius, P. C. Cross,
 * Molecular Vibrations (1955).
 */

const DEGREES = 180 / Math.PI;
const KCAL_PER_DEGREE_SQUARED = 143.9325 / (DEGREES * DEGREES);

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

/** Energy of one Wilson angle in kcal/mol, from the angle in degrees and its force constant in md angstrom/rad^2. */
export function outOfPlane(chi: number, force: number): number {
  return 0.5 * KCAL_PER_DEGREE_SQUARED * force * chi * chi;
}

/** Adds the gradient (kcal/mol/angstrom) of every Wilson angle to `gradient` and returns the energy (kcal/mol). */
export function addOutOfPlane(table: OutOfPlaneTable, x: Float64Array, gradient: Float64Array): number {
  const { force } = table;
  let energy = 0;
  for (let n = 0; n < force.length; n++) {
    const i = table.i[n], j = table.j[n], k = table.k[n], l = table.l[n];

    // u, v from the centre to i and k, w of unit length from the centre to l
    const ux = x[i] - x[j], uy = x[i + 1] - x[j + 1], uz = x[i + 2] - x[j + 2];
    const vx = x[k] - x[j], vy = x[k + 1] - x[j + 1], vz = x[k + 2] - x[j + 2];
    let wx = x[l] - x[j], wy = x[l + 1] - x[j + 1], wz = x[l + 2] - x[j + 2];
    const perW = 1 / Math.sqrt(wx * wx + wy * wy + wz * wz + 1e-24);
    wx *= perW; wy *= perW; wz *= perW;

    // unit normal m of the plane; three atoms in a line span none, their area is kept away from zero
    let mx = uy * vz - uz * vy, my = uz * vx - ux * vz, mz = ux * vy - uy * vx;
    const perArea = 1 / Math.sqrt(mx * mx + my * my + mz * mz + 1e-18);
    mx *= perArea; my *= perArea; mz *= perArea;
    const sine = Math.min(Math.max(mx * wx + my * wy + mz * wz, -1), 1);
    const chi = DEGREES * Math.asin(sine);
    energy += outOfPlane(chi, force[n]);

    // dE/dsine: a bond upright on the plane has no side to fall to, its cosine is kept away from zero
    const perSine = (KCAL_PER_DEGREE_SQUARED * DEGREES * force[n] * chi) / Math.sqrt(1 - sine * sine + 1e-12);
    // p = w - sine m lies in the plane; dsine/du = v x p / area, dsine/dv = p x u / area, dsine/dw = (m - sine w) / |w|
    const px = wx - sine * mx, py = wy - sine * my, pz = wz - sine * mz;
    const inPlane = perSine * perArea, upright = perSine * perW;
    const gix = inPlane * (vy * pz - vz * py), giy = inPlane * (vz * px - vx * pz), giz = inPlane * (vx * py - vy * px);
    const gkx = inPlane * (py * uz - pz * uy), gky = inPlane * (pz * ux - px * uz), gkz = inPlane * (px * uy - py * ux);
    const glx = upright * (mx - sine * wx), gly = upright * (my - sine * wy), glz = upright * (mz - sine * wz);
    gradient[i] += gix; gradient[i + 1] += giy; gradient[i + 2] += giz;
    gradient[k] += gkx; gradient[k + 1] += gky; gradient[k + 2] += gkz;
    gradient[l] += glx; gradient[l + 1] += gly; gradient[l + 2] += glz;
    gradient[j] -= gix + gkx + glx; gradient[j + 1] -= giy + gky + gly; gradient[j + 2] -= giz + gkz + glz;
  }
  return energy;
}
