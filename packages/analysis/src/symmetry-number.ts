import type { Coordinates } from '@tordial/geometry';
import { isometries } from './isometries.js';

/** Rotational symmetry of one rigid geometry. */
export interface ExternalSymmetry {
  /** External symmetry number: order of the rotational subgroup of the point group, of a linear molecule 1 or 2. */
  readonly symmetryNumber: number;
  /** No reflection lays the structure on itself. */
  readonly chiral: boolean;
}

/**
 * External symmetry number of a geometry (3 values an atom, angstrom), counted on the geometry itself: relabellings of equal atoms that a
 * rotation brings about. Turning a methyl inside the molecule is none, so internal symmetry is never counted here; count that in the
 * hindered rotor. `tolerance` in angstrom, 0.1 when left out: relaxed coordinates are symmetric to about that.
 *
 * Source: G. Herzberg, Infrared and Raman Spectra of Polyatomic Molecules, Van Nostrand 1945, chapter V.1; A. Fernandez-Ramos,
 * B. A. Ellingson, R. Meana-Paneda, J. M. C. Marques, D. G. Truhlar, Theor. Chem. Acc. 118, 813 (2007).
 */
export function externalSymmetry(x: Coordinates, atomicNumbers: ArrayLike<number>, tolerance = 0.1): ExternalSymmetry {
  const found = isometries(x, x, atomicNumbers, { tolerance });
  return { symmetryNumber: found.filter((isometry) => isometry.proper).length, chiral: !found.some((isometry) => isometry.improper) };
}
