/** How much two structures of one molecule differ when atoms that its symmetry makes equivalent may stand for each other. */
import { type AutomorphismGroup, automorphisms } from './automorphisms.js';
import type { Coordinates, Molecule } from './molecule.js';
import { leastRmsd } from './superpose.js';

/**
 * The least root mean square distance (angstrom) of the heavy atoms of x and y over all rotations and all automorphisms that keep stated
 * configurations; of all atoms where fewer than two are heavy. `group` saves working out the automorphisms again; a group that is listed in
 * part only (`complete` false) gives an upper bound. Throws `geometry/superposition` when sizes differ.
 */
export function symmetricRmsd(
  molecule: Molecule,
  x: Coordinates,
  y: Coordinates,
  group: AutomorphismGroup = automorphisms(molecule),
): number {
  const heavy = Array.from(molecule.atomicNumbers.keys()).filter((i) => molecule.atomicNumbers[i] > 1);
  const atoms = heavy.length > 1 ? heavy : undefined;
  let least = Number.POSITIVE_INFINITY;
  for (const { image, preservesStereo } of group.automorphisms)
    if (preservesStereo) least = Math.min(least, leastRmsd(x, y, { atoms, image }));
  return least;
}
