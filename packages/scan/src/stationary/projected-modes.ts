/**
 * Eigenvalues of a Hessian freed of translation and rotation.
 *
 *   W^(-1/2) P H P W^(-1/2) q = lambda q
 *
 * With W the masses these are the squares of the vibrations' angular frequencies, with W = 1 the curvatures in plain coordinates; at a stationary
 * point both have the same number of negative ones (Sylvester's law of inertia). The motions taken out are moved far above all others, so that no
 * soft motion can mix with them.
 *
 * Source: W. H. Miller, N. C. Handy, J. E. Adams, J. Chem. Phys. 72, 99 (1980).
 */
import type { Coordinates } from '@tordial/geometry';
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';

/** Motions of a structure, softest (or most negative) first. */
export interface Modes {
  /** Energy unit of the Hessian per angstrom^2 (and per amu when weighted). */
  readonly eigenvalues: Float64Array;
  /** Of each a vector of unit length, in weighted coordinates sqrt(w) x. */
  readonly vectors: readonly Float64Array[];
}

/**
 * Modes of `hessian` (row-major, symmetric) without the motions `taken` (orthonormal, in weighted coordinates). `weights`: one for each three
 * coordinates, all 1 when left out.
 */
export function projectedModes(hessian: ArrayLike<number>, taken: readonly Float64Array[], weights?: ArrayLike<number>): Modes {
  const size = Math.round(Math.sqrt(hessian.length));
  const root = Float64Array.from({ length: size }, (_, n) => (weights ? Math.sqrt(weights[Math.floor(n / 3)]) : 1));
  const A = new Float64Array(size * size);
  for (let i = 0; i < size; i++) for (let j = 0; j < size; j++) A[i * size + j] = hessian[i * size + j] / (root[i] * root[j]);
  const along = new Float64Array(size);
  let norm = 0;
  for (const t of taken) {
    let twice = 0;
    for (let i = 0; i < size; i++) {
      let sum = 0;
      for (let j = 0; j < size; j++) sum += A[i * size + j] * t[j];
      along[i] = sum;
      twice += t[i] * sum;
    }
    for (let i = 0; i < size; i++)
      for (let j = 0; j < size; j++) A[i * size + j] += twice * t[i] * t[j] - t[i] * along[j] - along[i] * t[j];
  }
  for (let n = 0; n < A.length; n++) norm += A[n] * A[n];
  const far = 10 * (1 + Math.sqrt(norm));
  for (const t of taken) for (let i = 0; i < size; i++) for (let j = 0; j < size; j++) A[i * size + j] += far * t[i] * t[j];

  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(Matrix.from1DArray(size, size, A), { assumeSymmetric: true });
  const order = realEigenvalues
    .map((_, n) => n)
    .sort((p, q) => realEigenvalues[p] - realEigenvalues[q])
    .slice(0, size - taken.length);
  return {
    eigenvalues: Float64Array.from(order, (n) => realEigenvalues[n]),
    vectors: order.map((n) => Float64Array.from({ length: size }, (_, row) => eigenvectorMatrix.get(row, n))),
  };
}

/**
 * Translations and rotations of a structure in weighted coordinates, orthonormal: 6, of a linear molecule 5, of an atom 3. `weights` as in
 * `projectedModes`: masses, or all 1 when left out.
 */
export function rigidMotions(x: Coordinates, weights?: ArrayLike<number>): Float64Array[] {
  const count = x.length / 3;
  const weight = (i: number): number => (weights ? weights[i] : 1);
  const centre = [0, 0, 0];
  let total = 0;
  for (let i = 0; i < count; i++) {
    total += weight(i);
    for (let k = 0; k < 3; k++) centre[k] += weight(i) * x[3 * i + k];
  }
  for (let k = 0; k < 3; k++) centre[k] /= total;

  const motions: Float64Array[] = [];
  const add = (motion: Float64Array): void => {
    const before = length(motion);
    // twice is enough to be orthogonal to rounding
    for (let pass = 0; pass < 2; pass++) for (const other of motions) removeAlong(motion, other);
    const after = length(motion);
    if (after > LINEAR * before) motions.push(motion.map((value) => value / after));
  };
  for (let k = 0; k < 3; k++) {
    const motion = new Float64Array(x.length);
    for (let i = 0; i < count; i++) motion[3 * i + k] = Math.sqrt(weight(i));
    add(motion);
  }
  // the widest axis of turning first, so that the turn of a linear molecule about itself is what is left over
  const turns = [0, 1, 2].map((k) => {
    const motion = new Float64Array(x.length);
    const p = (k + 1) % 3;
    const q = (k + 2) % 3;
    for (let i = 0; i < count; i++) {
      motion[3 * i + p] = -Math.sqrt(weight(i)) * (x[3 * i + q] - centre[q]);
      motion[3 * i + q] = Math.sqrt(weight(i)) * (x[3 * i + p] - centre[p]);
    }
    return motion;
  });
  const size = Math.max(...turns.map(length));
  for (const motion of turns.sort((a, b) => length(b) - length(a))) if (length(motion) > LINEAR * size) add(motion);
  return motions;
}

/** A turn that moves the atoms less than this part of what another turn does is the turn of a line about itself. */
const LINEAR = 1e-4;

/** Takes the part along the unit vector `t` out of v, in place. */
export function removeAlong(v: Float64Array, t: Float64Array): void {
  const part = dot(v, t);
  for (let n = 0; n < v.length; n++) v[n] -= part * t[n];
}

export function dot(u: ArrayLike<number>, v: ArrayLike<number>): number {
  let sum = 0;
  for (let n = 0; n < u.length; n++) sum += u[n] * v[n];
  return sum;
}

export function length(v: ArrayLike<number>): number {
  return Math.sqrt(dot(v, v));
}
