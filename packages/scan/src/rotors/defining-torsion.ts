/**
 * The four atoms whose torsion angle describes the conformation about a bond, by the rule of Klyne and Prelog.
 *
 * Among the substituents of each axis atom the defining one is: where all differ, the one of highest CIP priority; where one is unique
 * and the others are alike, the unique one; where all are alike, the one that gives the smallest torsion angle.
 * Source: W. Klyne and V. Prelog, Experientia 16, 521 (1960); IUPAC, Basic terminology of stereochemistry (1996), "torsion angle".
 *
 * Lone pairs are no substituents here: of an NH2 group's two hydrogens the one with the smaller angle defines, not the lone pair.
 * Substituents that differ in configuration alone count as alike.
 */
import { atomOrbits, type Coordinates, cipPriority, type Molecule, neighboursOf, TordialError, torsion } from '@tordial/geometry';

export type Torsion = readonly [number, number, number, number];

/** Angles closer than this (radians) count as equal, so that rounding does not choose between mirror images. */
const SAME_ANGLE = 1e-5;

/**
 * The defining torsion i-b-c-l about the bond b-c. Among substituents that are all alike the smallest angle at the given coordinates
 * decides, the lowest index where none are given or angles agree. Throws `torsion/chain` when b and c are not bonded or one of
 * them has no other neighbour.
 */
export function torsionOfAxis(molecule: Molecule, b: number, c: number, x?: Coordinates): Torsion {
  if (!neighboursOf(molecule, b).includes(c)) throw new TordialError('torsion/chain', `atoms ${b} and ${c} are not bonded`, { atom: b });
  const [front, rear] = [definingSubstituents(molecule, b, c), definingSubstituents(molecule, c, b)];
  let best: Torsion = [front[0], b, c, rear[0]];
  if (!x) return best;
  let smallest = Number.POSITIVE_INFINITY;
  for (const i of front)
    for (const l of rear) {
      const size = Math.abs(torsion(x, i, b, c, l));
      if (size >= smallest - SAME_ANGLE) continue;
      smallest = size;
      best = [i, b, c, l];
    }
  return best;
}

/** The substituent of `atom` that defines, or all of those among which only the angle can choose; ascending. */
function definingSubstituents(molecule: Molecule, atom: number, partner: number): Int32Array {
  const substituents = neighboursOf(molecule, atom).filter((j) => j !== partner);
  if (substituents.length === 0)
    throw new TordialError('torsion/chain', `atom ${atom} has no neighbour but ${partner}, so that no torsion angle is defined`, { atom });
  const kind = kindsOfSubstituent(molecule, atom, partner, substituents);
  const alike = (j: number) => substituents.filter((k) => kind[k] === kind[j]);
  const unique = substituents.filter((j) => alike(j).length === 1);
  if (unique.length === 1) return unique;
  const pool = unique.length > 0 ? unique : substituents;
  if (pool.every((j) => kind[j] === kind[pool[0]])) return pool;
  for (const group of cipPriority(molecule, atom)) {
    const highest = group.find((j) => pool.includes(j));
    if (highest !== undefined) return alike(highest);
  }
  return pool;
}

/** A number an atom that like substituents share: symmetry classes, checked by permutations where larger groups share one. */
function kindsOfSubstituent(molecule: Molecule, atom: number, partner: number, substituents: Int32Array): Int32Array {
  const { symmetryClasses } = molecule;
  const groups = substituents.filter((j) => neighboursOf(molecule, j).length > 1);
  const shared = new Set(groups.map((j) => symmetryClasses[j])).size < groups.length;
  return shared ? atomOrbits(molecule, { fixed: [atom, partner], stereo: 'ignored' }) : symmetryClasses;
}
