/** Whether two relaxed structures are one minimum: equal energy, and a superposition that may exchange equivalent atoms. */
import { type AutomorphismGroup, automorphisms, type Coordinates, leastRmsd, type Molecule, symmetricRmsd } from '@tordial/geometry';

/** Energies of one tightly relaxed minimum agree to this, kcal/mol. */
const SAME_ENERGY = 2e-3;
/** Root mean square distance (angstrom) of one minimum from two starts: soft motions settle to about a hundredth. */
const SAME_PLACE = 0.1;
/** Permutations of all atoms that are tried; a larger group is compared by its heavy atoms. */
const MOST_PERMUTATIONS = 1000;

export interface Minimum {
  /** kcal/mol. */
  readonly energy: number;
  /** Angstrom. */
  readonly coordinates: Coordinates;
}

/** A comparison for the minima of one molecule. Mirror images are two minima. */
export function sameMinimum(molecule: Molecule): (p: Minimum, q: Minimum) => boolean {
  let all: AutomorphismGroup | null = null;
  let heavy: AutomorphismGroup | null = null;
  return (p, q) => {
    if (Math.abs(p.energy - q.energy) > SAME_ENERGY) return false;
    // most pairs are the same with the atoms as they are numbered
    if (leastRmsd(p.coordinates, q.coordinates) <= SAME_PLACE) return true;
    all ??= automorphisms(molecule, { following: 'none', limit: MOST_PERMUTATIONS });
    if (all.complete)
      return all.automorphisms.some(
        ({ image, preservesStereo }) => preservesStereo && leastRmsd(p.coordinates, q.coordinates, { image }) <= SAME_PLACE,
      );
    heavy ??= automorphisms(molecule, { limit: MOST_PERMUTATIONS });
    return symmetricRmsd(molecule, p.coordinates, q.coordinates, heavy) <= SAME_PLACE;
  };
}
