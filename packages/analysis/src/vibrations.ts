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
import { projectedModes, rigidMotions } from '@tordial/scan';
import { AVOGADRO, JOULE_PER_CALORIE, PLANCK, SPEED_OF_LIGHT, WAVENUMBER_OF_FORCE } from './constants.js';

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
  for (let i = 0; i < size; i++)
    for (let j = 0; j < i; j++)
      if (Math.abs(hessian[i * size + j] - hessian[j * size + i]) > 1e-6 * largest)
        throw new TordialError(
          'vibrations/hessian',
          `the Hessian is not symmetric: elements ${i}, ${j} are ${hessian[i * size + j]} and ${hessian[j * size + i]}`,
        );
  const { eigenvalues, vectors } = projectedModes(hessian, rigidMotions(x, masses), masses);
  return {
    frequencies: eigenvalues.map((lambda) => Math.sign(lambda) * Math.sqrt(Math.abs(lambda)) * WAVENUMBER_OF_FORCE),
    modes: vectors,
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

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let n = 0; n < a.length; n++) sum += a[n] * b[n];
  return sum;
}
