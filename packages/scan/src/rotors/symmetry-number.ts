/** Rotational symmetry of one side of a bond about that bond. */
import type { Molecule } from '@tordial/geometry';
import { neighboursOf } from '@tordial/geometry';
import { atomShape } from './atom-shape.js';

/**
 * Number of positions within a full turn in which the side at `atom` looks the same: 3 for a tetrahedral atom with three equivalent
 * substituents (methyl, tert-butyl, ammonium), 2 for a planar atom with two (phenyl, nitro, carboxylate, dimethylamide), 4 for an
 * octahedral one with five, else 1. `orbits` are those of the atoms with both axis atoms held (`atomOrbits`): substituents count as
 * equivalent when a permutation of the graph that keeps all stereochemistry takes one into the other.
 *
 * This is the usual practice of internal-rotation work: it assumes that the side itself takes its symmetric shape.
 */
export function symmetryNumberOfSide(molecule: Molecule, atom: number, partner: number, orbits: Int32Array): number {
  const substituents = neighboursOf(molecule, atom).filter((j) => j !== partner);
  if (substituents.length < 2 || substituents.some((j) => orbits[j] !== orbits[substituents[0]])) return 1;
  switch (atomShape(molecule, atom)) {
    case 'planar':
      return 2;
    case 'tetrahedral':
      return 3;
    case 'octahedral':
      return 4;
    default:
      return 1;
  }
}

/** Period in degrees of the profile of two rigid sides with these symmetry numbers: toluene's 3 and 2 give 60. */
export function profilePeriod(first: number, second: number): number {
  let [p, q] = [first, second];
  while (q > 0) [p, q] = [q, p % q];
  return 360 / ((first * second) / p);
}
