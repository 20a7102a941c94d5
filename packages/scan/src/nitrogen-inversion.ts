/** Pyramidal nitrogens next to a rotor's axis, turned inside out. */
import { type Coordinates, type Molecule, neighboursOf } from '@tordial/geometry';
import type { DrivenRotor } from './driven-rotor.js';

/** A nitrogen closer to the plane of its three neighbours than this, angstrom, is planar. */
const PLANAR = 0.1;

/**
 * One geometry for each pyramidal three-coordinate nitrogen on the axis or bonded to it, with that nitrogen moved to its mirror image in the
 * plane of its neighbours: all its bond lengths stay. The rotor's angle changes when the nitrogen is on the axis.
 */
export function invertedNitrogens(molecule: Molecule, { torsion: [, a, b] }: DrivenRotor, x: Coordinates): Coordinates[] {
  const near = new Set([a, b, ...neighboursOf(molecule, a), ...neighboursOf(molecule, b)]);
  const inverted: Coordinates[] = [];
  for (const atom of [...near].sort((p, q) => p - q)) {
    if (molecule.atomicNumbers[atom] !== 7) continue;
    const around = neighboursOf(molecule, atom);
    if (around.length !== 3) continue;
    const [p, q, r] = around;
    const ux = x[3 * q] - x[3 * p],
      uy = x[3 * q + 1] - x[3 * p + 1],
      uz = x[3 * q + 2] - x[3 * p + 2];
    const vx = x[3 * r] - x[3 * p],
      vy = x[3 * r + 1] - x[3 * p + 1],
      vz = x[3 * r + 2] - x[3 * p + 2];
    const nx = uy * vz - uz * vy,
      ny = uz * vx - ux * vz,
      nz = ux * vy - uy * vx;
    const length = Math.hypot(nx, ny, nz);
    const height = ((x[3 * atom] - x[3 * p]) * nx + (x[3 * atom + 1] - x[3 * p + 1]) * ny + (x[3 * atom + 2] - x[3 * p + 2]) * nz) / length;
    if (!(Math.abs(height) > PLANAR)) continue;
    const image = x.slice();
    image[3 * atom] -= (2 * height * nx) / length;
    image[3 * atom + 1] -= (2 * height * ny) / length;
    image[3 * atom + 2] -= (2 * height * nz) / length;
    inverted.push(image);
  }
  return inverted;
}
