/**
 * Optimal rigid superposition of two sets of coordinates.
 *
 * The rotation is the eigenvector of the largest eigenvalue of a symmetric 4 x 4 matrix of quaternions.
 * Source: B. K. P. Horn, J. Opt. Soc. Am. A 4, 629 (1987); D. L. Theobald, Acta Cryst. A 61, 478 (2005).
 */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { TordialError } from './errors.js';
import type { Coordinates } from './molecule.js';

export interface SuperpositionOptions {
  /** Atoms that count, by index in the reference; all when left out. */
  readonly atoms?: ArrayLike<number>;
  /** Atom of the moving structure that stands for atom i of the reference (an automorphism); i itself when left out. */
  readonly image?: ArrayLike<number>;
  /** Weights (masses, say), one an atom of the reference, not negative; all 1 when left out. */
  readonly weights?: ArrayLike<number>;
}

export interface Superposition {
  /** The whole moving structure in the frame of the reference, in its own atom order, angstrom. */
  readonly coordinates: Coordinates;
  /** Weighted root mean square distance of the atoms that count, angstrom. */
  readonly rmsd: number;
  /** Row-major 3 x 3 rotation R and translation t (angstrom): x' = R x + t. */
  readonly rotation: Float64Array;
  readonly translation: Float64Array;
}

/**
 * Moves `moving` onto `reference` by the proper rotation and the translation that make the root mean square distance least.
 * Throws `geometry/superposition` when sizes differ, an atom is not there or no weight is positive.
 */
export function superpose(moving: Coordinates, reference: Coordinates, options: SuperpositionOptions = {}): Superposition {
  const pairs = pairUp(moving, reference, options);
  const { covariance, centreMoving: c, centreReference: d } = correlate(moving, reference, pairs);
  const decomposition = new EigenvalueDecomposition(quaternionMatrix(covariance), { assumeSymmetric: true });
  const best = indexOfLargest(decomposition.realEigenvalues);
  const [w, x, y, z] = [0, 1, 2, 3].map((row) => decomposition.eigenvectorMatrix.get(row, best));
  const rotation = Float64Array.of(
    w * w + x * x - y * y - z * z,
    2 * (x * y - w * z),
    2 * (x * z + w * y),
    2 * (x * y + w * z),
    w * w - x * x + y * y - z * z,
    2 * (y * z - w * x),
    2 * (x * z - w * y),
    2 * (y * z + w * x),
    w * w - x * x - y * y + z * z,
  );
  const translation = Float64Array.from(
    [0, 1, 2],
    (k) => d[k] - (rotation[3 * k] * c[0] + rotation[3 * k + 1] * c[1] + rotation[3 * k + 2] * c[2]),
  );
  const coordinates = new Float64Array(moving.length);
  for (let at = 0; at < moving.length; at += 3)
    for (let k = 0; k < 3; k++)
      coordinates[at + k] =
        rotation[3 * k] * moving[at] + rotation[3 * k + 1] * moving[at + 1] + rotation[3 * k + 2] * moving[at + 2] + translation[k];
  return { coordinates, rmsd: weightedRmsd(coordinates, reference, pairs), rotation, translation };
}

/** Weighted root mean square distance (angstrom) of two structures as they stand, without moving either. Throws as `superpose` does. */
export function rmsd(moving: Coordinates, reference: Coordinates, options: SuperpositionOptions = {}): number {
  return weightedRmsd(moving, reference, pairUp(moving, reference, options));
}

/**
 * The least weighted root mean square distance (angstrom) that any superposition reaches, from the eigenvalue alone: cheaper than
 * `superpose`, exact to about 1e-7 of the structure's size. Throws as `superpose` does.
 */
export function leastRmsd(moving: Coordinates, reference: Coordinates, options: SuperpositionOptions = {}): number {
  const { covariance, spread, totalWeight } = correlate(moving, reference, pairUp(moving, reference, options));
  return Math.sqrt(Math.max(0, spread - 2 * largestEigenvalue(covariance, spread / 2)) / totalWeight);
}

interface Pairs {
  readonly moving: Int32Array;
  readonly reference: Int32Array;
  readonly weight: Float64Array;
}

function pairUp(moving: Coordinates, reference: Coordinates, { atoms, image, weights }: SuperpositionOptions): Pairs {
  const count = reference.length / 3;
  if (moving.length !== reference.length)
    throw new TordialError('geometry/superposition', `structures of ${moving.length / 3} and ${count} atoms cannot be superposed`);
  const chosen = atoms ? atoms.length : count;
  const pairs = { moving: new Int32Array(chosen), reference: new Int32Array(chosen), weight: new Float64Array(chosen) };
  let heaviest = 0;
  for (let n = 0; n < chosen; n++) {
    const i = atoms ? atoms[n] : n;
    const partner = image ? image[i] : i;
    const weight = weights ? weights[i] : 1;
    if (!(i >= 0 && i < count && partner >= 0 && partner < count && weight >= 0))
      throw new TordialError('geometry/superposition', `atom ${i} has no partner or no weight among the ${count} atoms`, { atom: i });
    pairs.reference[n] = i;
    pairs.moving[n] = partner;
    pairs.weight[n] = weight;
    heaviest = Math.max(heaviest, weight);
  }
  if (!(heaviest > 0)) throw new TordialError('geometry/superposition', 'no atom with a positive weight is left to superpose');
  return pairs;
}

/** Weighted covariance of the centred structures (row: moving, column: reference), their centres, and the sum of both squared radii. */
function correlate(moving: Coordinates, reference: Coordinates, pairs: Pairs) {
  const centreMoving = new Float64Array(3);
  const centreReference = new Float64Array(3);
  let totalWeight = 0;
  for (let n = 0; n < pairs.weight.length; n++) {
    const w = pairs.weight[n];
    const p = 3 * pairs.moving[n];
    const q = 3 * pairs.reference[n];
    totalWeight += w;
    for (let k = 0; k < 3; k++) {
      centreMoving[k] += w * moving[p + k];
      centreReference[k] += w * reference[q + k];
    }
  }
  for (let k = 0; k < 3; k++) {
    centreMoving[k] /= totalWeight;
    centreReference[k] /= totalWeight;
  }
  const covariance = new Float64Array(9);
  let spread = 0;
  for (let n = 0; n < pairs.weight.length; n++) {
    const w = pairs.weight[n];
    const p = 3 * pairs.moving[n];
    const q = 3 * pairs.reference[n];
    const px = moving[p] - centreMoving[0];
    const py = moving[p + 1] - centreMoving[1];
    const pz = moving[p + 2] - centreMoving[2];
    const qx = reference[q] - centreReference[0];
    const qy = reference[q + 1] - centreReference[1];
    const qz = reference[q + 2] - centreReference[2];
    spread += w * (px * px + py * py + pz * pz + qx * qx + qy * qy + qz * qz);
    covariance[0] += w * px * qx;
    covariance[1] += w * px * qy;
    covariance[2] += w * px * qz;
    covariance[3] += w * py * qx;
    covariance[4] += w * py * qy;
    covariance[5] += w * py * qz;
    covariance[6] += w * pz * qx;
    covariance[7] += w * pz * qy;
    covariance[8] += w * pz * qz;
  }
  return { covariance, centreMoving, centreReference, spread, totalWeight };
}

/** Newton steps at most, and the slope (relative to that of four simple roots) below which they are not trusted. */
const NEWTON_STEPS = 30;
const FLAT = 1e-4;

/**
 * Largest eigenvalue of the quaternion matrix of a covariance: Newton's method on the characteristic polynomial from an upper bound
 * (Theobald 2005), which falls monotonically to the largest root; where that is nearly double (planar and linear structures turned
 * over), the full decomposition.
 */
function largestEigenvalue(covariance: Float64Array, upperBound: number): number {
  // by index: taking a typed array apart by its iterator costs more than all that follows
  const xx = covariance[0],
    xy = covariance[1],
    xz = covariance[2];
  const yx = covariance[3],
    yy = covariance[4],
    yz = covariance[5];
  const zx = covariance[6],
    zy = covariance[7],
    zz = covariance[8];
  const c2 = -2 * (xx * xx + xy * xy + xz * xz + yx * yx + yy * yy + yz * yz + zx * zx + zy * zy + zz * zz);
  const c1 = -8 * (xx * (yy * zz - yz * zy) - xy * (yx * zz - yz * zx) + xz * (yx * zy - yy * zx));
  // determinant of the matrix, its rows as in quaternionMatrix
  const a = xx + yy + zz,
    b = xx - yy - zz,
    c = yy - xx - zz,
    d = zz - xx - yy;
  const p = yz - zy,
    q = zx - xz,
    r = xy - yx,
    s = xy + yx,
    t = zx + xz,
    u = yz + zy;
  const c0 =
    a * (b * (c * d - u * u) - s * (s * d - u * t) + t * (s * u - c * t)) -
    p * (p * (c * d - u * u) - s * (q * d - u * r) + t * (q * u - c * r)) +
    q * (p * (s * d - u * t) - b * (q * d - u * r) + t * (q * t - s * r)) -
    r * (p * (s * u - c * t) - b * (q * u - c * r) + s * (q * t - s * r));
  let root = upperBound;
  for (let step = 0; step < NEWTON_STEPS; step++) {
    const square = root * root;
    const slope = 4 * square * root + 2 * c2 * root + c1;
    if (!(slope > FLAT * square * root)) break;
    const change = (square * square + c2 * square + c1 * root + c0) / slope;
    root -= change;
    if (Math.abs(change) < 1e-13 * root) return root;
  }
  const { realEigenvalues } = new EigenvalueDecomposition(quaternionMatrix(covariance), { assumeSymmetric: true });
  return realEigenvalues[indexOfLargest(realEigenvalues)];
}

/** Horn's symmetric matrix N of the covariance S (row: moving, column: reference). */
function quaternionMatrix([xx, xy, xz, yx, yy, yz, zx, zy, zz]: Float64Array): Matrix {
  return new Matrix([
    [xx + yy + zz, yz - zy, zx - xz, xy - yx],
    [yz - zy, xx - yy - zz, xy + yx, zx + xz],
    [zx - xz, xy + yx, -xx + yy - zz, yz + zy],
    [xy - yx, zx + xz, yz + zy, -xx - yy + zz],
  ]);
}

function indexOfLargest(values: ArrayLike<number>): number {
  let best = 0;
  for (let n = 1; n < values.length; n++) if (values[n] > values[best]) best = n;
  return best;
}

function weightedRmsd(moving: Coordinates, reference: Coordinates, pairs: Pairs): number {
  let sum = 0;
  let total = 0;
  for (let n = 0; n < pairs.weight.length; n++) {
    const p = 3 * pairs.moving[n];
    const q = 3 * pairs.reference[n];
    const dx = moving[p] - reference[q];
    const dy = moving[p + 1] - reference[q + 1];
    const dz = moving[p + 2] - reference[q + 2];
    total += pairs.weight[n];
    sum += pairs.weight[n] * (dx * dx + dy * dy + dz * dz);
  }
  return Math.sqrt(sum / total);
}
