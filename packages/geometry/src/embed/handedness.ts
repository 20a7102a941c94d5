/**
 * Handedness as signed volumes: of the tetrahedron of four substituents, or of three and the centre, or of an axis and its two ends.
 *
 * Source: G. M. Crippen, T. F. Havel, Distance Geometry and Molecular Conformation (1988), chapter 3.
 */
import type { Molecule } from '../molecule.js';
import type { DistanceBounds } from './triangle-smoothing.js';

/** Four points p0..p3 whose (p0 - p3) . ((p1 - p3) x (p2 - p3)) must have the sign of `least` and at least its size (cubic angstrom). */
export interface SignedVolumes {
  readonly count: number;
  /** Four atoms a row. */
  readonly atoms: Int32Array;
  readonly least: Float64Array;
}

/** Of the volume that the bounds' mean distances give, this share is asked for. */
const SHARE = 0.6;

/** The volumes that the stated stereocentres and axes ask for; bounds give their size. */
export function signedVolumes({ stereo }: Molecule, bounds: DistanceBounds): SignedVolumes {
  const rows: { atoms: number[]; sign: number }[] = [];
  for (const { atom, neighbours, sign } of stereo.tetrahedral)
    if (sign !== 0) rows.push({ atoms: [neighbours[0], neighbours[1], neighbours[2], neighbours[3] < 0 ? atom : neighbours[3]], sign });
  // the torsion's triple product has the opposite sign of the tetrahedron's
  for (const { a, b, substituentA, substituentB, sign } of stereo.axes)
    if (sign !== 0) rows.push({ atoms: [substituentA, a, b, substituentB], sign: -sign });
  return {
    count: rows.length,
    atoms: Int32Array.from(rows.flatMap(({ atoms }) => atoms)),
    least: Float64Array.from(rows, ({ atoms, sign }) => sign * Math.max(0.5, SHARE * meanVolume(atoms, bounds))),
  };
}

/** Six times the volume of the tetrahedron with the mean of the bounds as edges (Cayley and Menger), 0 if no such body exists. */
function meanVolume([p, q, r, s]: readonly number[], { size, lower, upper }: DistanceBounds): number {
  const square = (i: number, j: number) => ((lower[i * size + j] + upper[i * size + j]) / 2) ** 2;
  // Gram determinant of the three edges from s
  const [a, b, c] = [square(p, s), square(q, s), square(r, s)];
  const ab = (a + b - square(p, q)) / 2;
  const ac = (a + c - square(p, r)) / 2;
  const bc = (b + c - square(q, r)) / 2;
  const determinant = a * (b * c - bc * bc) - ab * (ab * c - bc * ac) + ac * (ab * bc - b * ac);
  return Math.sqrt(Math.max(0, determinant));
}

/** The signed volume of row n at coordinates with `stride` values an atom. */
export function signedVolume({ atoms }: SignedVolumes, n: number, x: Float64Array, stride: number): number {
  const [p, q, r, s] = [stride * atoms[4 * n], stride * atoms[4 * n + 1], stride * atoms[4 * n + 2], stride * atoms[4 * n + 3]];
  const ax = x[p] - x[s];
  const ay = x[p + 1] - x[s + 1];
  const az = x[p + 2] - x[s + 2];
  const bx = x[q] - x[s];
  const by = x[q + 1] - x[s + 1];
  const bz = x[q + 2] - x[s + 2];
  const cx = x[r] - x[s];
  const cy = x[r + 1] - x[s + 1];
  const cz = x[r + 2] - x[s + 2];
  return ax * (by * cz - bz * cy) + ay * (bz * cx - bx * cz) + az * (bx * cy - by * cx);
}

/**
 * Adds weight (v / least - 1)^2 for every volume short of its least one, and its gradient; returns the sum.
 * Only the first three coordinates of an atom count.
 */
export function addVolumeError(volumes: SignedVolumes, x: Float64Array, stride: number, weight: number, gradient: Float64Array): number {
  let sum = 0;
  const { atoms, least, count } = volumes;
  for (let n = 0; n < count; n++) {
    const p = stride * atoms[4 * n];
    const q = stride * atoms[4 * n + 1];
    const r = stride * atoms[4 * n + 2];
    const s = stride * atoms[4 * n + 3];
    const ax = x[p] - x[s];
    const ay = x[p + 1] - x[s + 1];
    const az = x[p + 2] - x[s + 2];
    const bx = x[q] - x[s];
    const by = x[q + 1] - x[s + 1];
    const bz = x[q + 2] - x[s + 2];
    const cx = x[r] - x[s];
    const cy = x[r + 1] - x[s + 1];
    const cz = x[r + 2] - x[s + 2];
    const ux = by * cz - bz * cy;
    const uy = bz * cx - bx * cz;
    const uz = bx * cy - by * cx;
    const short = (ax * ux + ay * uy + az * uz) / least[n] - 1;
    if (short >= 0) continue;
    sum += weight * short * short;
    const slope = (2 * weight * short) / least[n];
    const vx = slope * (cy * az - cz * ay);
    const vy = slope * (cz * ax - cx * az);
    const vz = slope * (cx * ay - cy * ax);
    const wx = slope * (ay * bz - az * by);
    const wy = slope * (az * bx - ax * bz);
    const wz = slope * (ax * by - ay * bx);
    gradient[p] += slope * ux;
    gradient[p + 1] += slope * uy;
    gradient[p + 2] += slope * uz;
    gradient[q] += vx;
    gradient[q + 1] += vy;
    gradient[q + 2] += vz;
    gradient[r] += wx;
    gradient[r + 1] += wy;
    gradient[r + 2] += wz;
    gradient[s] -= slope * ux + vx + wx;
    gradient[s + 1] -= slope * uy + vy + wy;
    gradient[s + 2] -= slope * uz + vz + wz;
  }
  return sum;
}
