/** Rotational symmetry of one side of a bond about that bond. */
import { atomOrbits, type Molecule, neighboursOf } from '@tordial/geometry';
import { type AtomShape, atomShape } from './atom-shape.js';

/** Positions that a shape's like substituents can take about the bond to the remaining one. */
const POSITIONS: Partial<Record<AtomShape, number>> = { planar: 2, tetrahedral: 3, octahedral: 4 };

/**
 * Number of positions within a full turn in which the side at `atom` looks the same: 3 for a tetrahedral atom with three equivalent
 * substituents (methyl, tert-butyl, ammonium), 2 for a planar atom with two (phenyl, nitro, carboxylate, dimethylamide), 4 for an
 * octahedral one with five, else 1. `side` lists the atoms that turn with `atom`, itself included. Substituents are equivalent when a
 * permutation of the side that keeps its stated stereochemistry takes one into the other.
 *
 * This is the usual practice of internal-rotation work: it assumes that the side itself takes its symmetric shape.
 */
export function symmetryNumberOfSide(molecule: Molecule, atom: number, partner: number, side: Int32Array): number {
  const { atomCount, symmetryClasses } = molecule;
  const positions = POSITIONS[atomShape(molecule, atom)];
  const [first, ...others] = neighboursOf(molecule, atom).filter((j) => j !== partner);
  if (positions === undefined || others.length === 0 || others.some((j) => symmetryClasses[j] !== symmetryClasses[first])) return 1;
  if (neighboursOf(molecule, first).length === 1) return positions;
  const turning = new Set(side);
  turning.delete(atom);
  const orbits = atomOrbits(molecule, { fixed: Array.from({ length: atomCount }, (_, i) => i).filter((i) => !turning.has(i)) });
  return others.every((j) => orbits[j] === orbits[first]) ? positions : 1;
}

/** Period in degrees of the profile of two rigid sides with these symmetry numbers: toluene's 3 and 2 give 60. */
export function profilePeriod(first: number, second: number): number {
  let [p, q] = [first, second];
  while (q > 0) [p, q] = [q, p % q];
  return 360 / ((first * second) / p);
}

/** Period in degrees of the profile of the bond a-b of a torsion i-a-b-j whose sides have these atoms. */
export function periodAbout(
  molecule: Molecule,
  [, a, b]: readonly [number, number, number, number],
  sides: { readonly a: Int32Array; readonly b: Int32Array },
): number {
  return profilePeriod(symmetryNumberOfSide(molecule, a, b, sides.a), symmetryNumberOfSide(molecule, b, a, sides.b));
}
