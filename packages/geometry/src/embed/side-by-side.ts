/** Separate fragments beside each other. */
import type { Coordinates, Molecule } from '../molecule.js';
import { contactRadius } from './bounds.js';

/** Free space between the contact surfaces of two fragments, angstrom. */
const GAP = 1;

/** Coordinates of the whole molecule from those of its fragments (each about its own centre), lined up along x. */
export function sideBySide(molecule: Molecule, fragments: readonly { readonly atoms: Int32Array; readonly x: Coordinates }[]): Coordinates {
  if (fragments.length === 1) return fragments[0].x;
  const whole = new Float64Array(3 * molecule.atomCount);
  let edge = 0;
  for (const { atoms, x } of fragments) {
    let left = 0;
    let right = 0;
    atoms.forEach((atom, n) => {
      const radius = contactRadius(molecule.atomicNumbers[atom]);
      left = Math.min(left, x[3 * n] - radius);
      right = Math.max(right, x[3 * n] + radius);
    });
    atoms.forEach((atom, n) => {
      whole[3 * atom] = x[3 * n] - left + edge;
      whole[3 * atom + 1] = x[3 * n + 1];
      whole[3 * atom + 2] = x[3 * n + 2];
    });
    edge += right - left + GAP;
  }
  return whole;
}
