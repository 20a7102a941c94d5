/**
 * Torsion: the first three terms of a Fourier series in the dihedral angle.
 *
 *   E(ijkl) = 0.5 (V1 (1 + cos phi) + V2 (1 - cos 2 phi) + V3 (1 + cos 3 phi))
 *
 * V and E in kcal/mol. The series is a cubic in cos phi, so no trigonometric function is called.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), equation 7; derivatives of the angle after A. Blondel and M. Karplus,
 * J. Comput. Chem. 17, 1132 (1996), which have no singularity at phi = 0 or 180 degrees.
 */

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

/** Energy of one torsion in kcal/mol, from the cosine of its dihedral angle; cos 2 phi = 2 cos^2 - 1, cos 3 phi = 4 cos^3 - 3 cos. */
export function torsion(cosine: number, v1: number, v2: number, v3: number): number {
  const square = cosine * cosine;
  return 0.5 * (v1 * (1 + cosine) + 2 * v2 * (1 - square) + v3 * (1 + cosine * (4 * square - 3)));
}

/** Adds the gradient (kcal/mol/angstrom) of every torsion to `gradient` and returns the energy (kcal/mol). */
export function addTorsions(table: TorsionTable, x: Float64Array, gradient: Float64Array): number {
  const { v1, v2, v3 } = table;
  let energy = 0;
  for (let n = 0; n < v1.length; n++) {
    const i = table.i[n], j = table.j[n], k = table.k[n], l = table.l[n];

    // f from j to i, g from k to j, h from k to l; a and b are normal to the two planes
    const fx = x[i] - x[j], fy = x[i + 1] - x[j + 1], fz = x[i + 2] - x[j + 2];
    const gx = x[j] - x[k], gy = x[j + 1] - x[k + 1], gz = x[j + 2] - x[k + 2];
    const hx = x[l] - x[k], hy = x[l + 1] - x[k + 1], hz = x[l + 2] - x[k + 2];
    const ax = fy * gz - fz * gy, ay = fz * gx - fx * gz, az = fx * gy - fy * gx;
    const bx = hy * gz - hz * gy, by = hz * gx - hx * gz, bz = hx * gy - hy * gx;

    // three atoms in a line have no dihedral angle: the squared areas are kept away from zero
    const perA2 = 1 / (ax * ax + ay * ay + az * az + 1e-18);
    const perB2 = 1 / (bx * bx + by * by + bz * bz + 1e-18);
    const g2 = gx * gx + gy * gy + gz * gz + 1e-18, perG2 = 1 / g2, lengthG = Math.sqrt(g2), perAB = Math.sqrt(perA2 * perB2);
    const cosine = (ax * bx + ay * by + az * bz) * perAB;
    // the triple product (b x a) . g / |g| shortened by a = f x g and b . g = 0
    const sine = -(fx * bx + fy * by + fz * bz) * lengthG * perAB;
    energy += torsion(cosine, v1[n], v2[n], v3[n]);

    // dE/dphi, with dcos/dphi = -sin
    const slope = -0.5 * sine * (v1[n] - 4 * v2[n] * cosine + v3[n] * (12 * cosine * cosine - 3));
    const toI = -slope * lengthG * perA2, toL = slope * lengthG * perB2;
    const gix = toI * ax, giy = toI * ay, giz = toI * az;
    const glx = toL * bx, gly = toL * by, glz = toL * bz;
    // the pull on the ends, moved along the axis to the two atoms that hold it
    const fg = (fx * gx + fy * gy + fz * gz) * perG2, hg = (hx * gx + hy * gy + hz * gz) * perG2;
    const sx = fg * gix + hg * glx, sy = fg * giy + hg * gly, sz = fg * giz + hg * glz;
    gradient[i] += gix; gradient[i + 1] += giy; gradient[i + 2] += giz;
    gradient[j] -= sx + gix; gradient[j + 1] -= sy + giy; gradient[j + 2] -= sz + giz;
    gradient[k] += sx - glx; gradient[k + 1] += sy - gly; gradient[k + 2] += sz - glz;
    gradient[l] += glx; gradient[l + 1] += gly; gradient[l + 2] += glz;
  }
  return energy;
}
