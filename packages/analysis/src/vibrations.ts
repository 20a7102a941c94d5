/**
 * Harmonic vibrations from a Hessian.
 *
 *   M^(-1/2) P H P M^(-1/2) q = lambda q,   nu = sqrt(lambda) / (2 pi c)
 *
 * P takes out translation and rotation (Eckart), 5 of them for a linear molecule, 6 otherwise, 3 for an atom.
 *
 * Source: E. B. Wilson, J. C. Decius, P. C. Cross, Molecular Vibrations, McGraw-Hill 1955, chapters 2 and 11; projection as in W. H. Miller,
 * N. C. Handy, J. E. Adams, J. Chem. Phys. 72, 99 (1980).
 */
import { type Coordinates, TordialError } from '@tordial/geometry';
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { AVOGADRO, JOULE_PER_CALORIE, PLANCK, SPEED_OF_LIGHT, WAVENUMBER_OF_FORCE } from './constants.js';
import { inertia } from './hindered-rotor/reduced-moment.js';

/** Normal modes of a molecule, 3N - 6 of them (3N - 5 when linear), ascending by frequency. */
export interface Vibrations {
  /** cm-1; imaginary frequencies are negative numbers. */
  readonly frequencies: Float64Array;
  /** Of each mode the mass-weighted displacement, 3N values of unit length. */
  readonly modes: readonly Float64Array[];
}

/**
 * Normal modes at a stationary point. `hessian`: 3N x 3N row-major, kcal/mol/angstrom^2; `x`: 3N coordinates in angstrom; `masses` in amu.
 * Throws `vibrations/hessian` for a Hessian of the wrong size, not finite, or not symmetric to 1e-6 of its largest element.
 */
export function vibrations(hessian: ArrayLike<number>, x: Coordinates, masses: ArrayLike<number>): Vibrations {
  const size = 3 * masses.length;
  if (x.length !== size || hessian.length !== size * size)
    throw new TordialError(
      'vibrations/hessian',
      `a Hessian of ${hessian.length} values for ${masses.length} atoms: ${size * size} are needed`,
    );
  let largest = 0;
  for (let n = 0; n < hessian.length; n++) {
    if (!Number.isFinite(hessian[n])) throw new TordialError('vibrations/hessian', 'the Hessian holds a value that is no number');
    largest = Math.max(largest, Math.abs(hessian[n]));
  }
  const weighted = new Matrix(size, size);
  for (let i = 0; i < size; i++)
    for (let j = 0; j <= i; j++) {
      const a = hessian[i * size + j];
      const b = hessian[j * size + i];
      if (Math.abs(a - b) > 1e-6 * largest)
        throw new TordialError('vibrations/hessian', `the Hessian is not symmetric: elements ${i}, ${j} are ${a} and ${b}`);
      const value = (a + b) / 2 / Math.sqrt(masses[Math.floor(i / 3)] * masses[Math.floor(j / 3)]);
      weighted.set(i, j, value);
      weighted.set(j, i, value);
    }

  // P H P with the taken-out motions moved far above all vibrations, so that no soft mode can mix with them
  const rigid = rigidMotions(x, masses);
  const far = 10 * (1 + weighted.norm('frobenius'));
  project(weighted, rigid);
  for (const motion of rigid)
    for (let i = 0; i < size; i++) for (let j = 0; j < size; j++) weighted.set(i, j, weighted.get(i, j) + far * motion[i] * motion[j]);
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(weighted, { assumeSymmetric: true });
  const order = realEigenvalues
    .map((_, n) => n)
    .sort((p, q) => realEigenvalues[p] - realEigenvalues[q])
    .slice(0, size - rigid.length);
  return {
    frequencies: Float64Array.from(
      order,
      (n) => Math.sign(realEigenvalues[n]) * Math.sqrt(Math.abs(realEigenvalues[n])) * WAVENUMBER_OF_FORCE,
    ),
    modes: order.map((n) => Float64Array.from({ length: size }, (_, row) => eigenvectorMatrix.get(row, n))),
  };
}

/** Zero-point energy, kcal/mol: half of every real frequency (cm-1); imaginary ones (negative) are no vibration and add nothing. */
export function zeroPointEnergy(frequencies: ArrayLike<number>): number {
  let sum = 0;
  for (let n = 0; n < frequencies.length; n++) if (frequencies[n] > 0) sum += frequencies[n];
  return (sum / 2) * ((100 * PLANCK * SPEED_OF_LIGHT * AVOGADRO) / (1000 * JOULE_PER_CALORIE));
}

/**
 * The mode that moves most along a path: index and overlap (0 to 1), the cosine between the mode and the mass-weighted tangent (dx/dphi,
 * 3N values) freed of translation and rotation. Which mode is the torsion, and whether a saddle's negative mode is the rotor's.
 */
export function modeAlong(
  { modes }: Vibrations,
  x: Coordinates,
  masses: ArrayLike<number>,
  tangent: ArrayLike<number>,
): { readonly mode: number; readonly overlap: number } {
  const q = Float64Array.from(tangent, (value, n) => value * Math.sqrt(masses[Math.floor(n / 3)]));
  for (const motion of rigidMotions(x, masses)) {
    const along = dot(motion, q);
    for (let n = 0; n < q.length; n++) q[n] -= along * motion[n];
  }
  const length = Math.sqrt(dot(q, q));
  if (!(length > 0)) throw new TordialError('vibrations/tangent', 'the path does not move the atoms against each other');
  let mode = 0;
  let overlap = 0;
  modes.forEach((vector, n) => {
    const cosine = Math.abs(dot(vector, q)) / length;
    if (cosine > overlap) {
      overlap = cosine;
      mode = n;
    }
  });
  return { mode, overlap };
}

/** Orthonormal mass-weighted translations and rotations of a geometry: 6, of a linear molecule 5, of an atom 3. */
function rigidMotions(x: Coordinates, masses: ArrayLike<number>): Float64Array[] {
  const count = masses.length;
  const { mass, centre, moments, axes } = inertia(x, masses);
  const motions: Float64Array[] = [];
  for (let k = 0; k < 3; k++) {
    const motion = new Float64Array(3 * count);
    for (let i = 0; i < count; i++) motion[3 * i + k] = Math.sqrt(masses[i] / mass);
    motions.push(motion);
  }
  for (let n = 0; n < 3; n++) {
    if (!(moments[n] > 1e-6 * moments[2]) || moments[n] === 0) continue;
    const [ux, uy, uz] = axes[n];
    const motion = new Float64Array(3 * count);
    for (let i = 0; i < count; i++) {
      const factor = Math.sqrt(masses[i] / moments[n]);
      const rx = x[3 * i] - centre[0];
      const ry = x[3 * i + 1] - centre[1];
      const rz = x[3 * i + 2] - centre[2];
      motion[3 * i] = factor * (uy * rz - uz * ry);
      motion[3 * i + 1] = factor * (uz * rx - ux * rz);
      motion[3 * i + 2] = factor * (ux * ry - uy * rx);
    }
    motions.push(motion);
  }
  return motions;
}

/** Replaces a symmetric A by P A P, P = 1 - sum_m m m^T, one motion after another. */
function project(A: Matrix, motions: readonly Float64Array[]): void {
  const size = A.rows;
  for (const m of motions) {
    const Am = Float64Array.from({ length: size }, (_, i) => {
      let sum = 0;
      for (let j = 0; j < size; j++) sum += A.get(i, j) * m[j];
      return sum;
    });
    const mAm = dot(m, Am);
    for (let i = 0; i < size; i++)
      for (let j = 0; j < size; j++) A.set(i, j, A.get(i, j) - m[i] * Am[j] - Am[i] * m[j] + mAm * m[i] * m[j]);
  }
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let n = 0; n < a.length; n++) sum += a[n] * b[n];
  return sum;
}
