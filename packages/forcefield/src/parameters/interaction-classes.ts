/**
 * Classes of bonds, angles, stretch-bend couplings and torsions: what tells apart interactions between the same atom types.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), Tables on bond, angle, stretch-bend and torsion types.
 */
import { bondBetween, neighboursOf } from '@tordial/geometry';
import type { AtomTyping } from '../typing/atom-types.js';
import { shareRing } from '../typing/ring-membership.js';
import { typeProperties } from './type-properties.js';

const ALKYL_CARBON = 1;

/**
 * Bond class: 1 for a single bond between atoms that also take part in multiple bonds (butadiene's middle bond) or between two aromatic
 * rings (biphenyl's), else 0. One entry a bond.
 */
export function bondClasses({ form, atomTypes, aromaticity }: AtomTyping): Uint8Array {
  const { sbmb, arom } = typeProperties();
  const { a, b, count } = form.molecule.bonds;
  const classes = new Uint8Array(count);
  for (let n = 0; n < count; n++) {
    if (form.order[n] !== 1 || aromaticity.bonds[n]) continue;
    const i = atomTypes[a[n]];
    const j = atomTypes[b[n]];
    if ((sbmb[i] && sbmb[j]) || (arom[i] && arom[j])) classes[n] = 1;
  }
  return classes;
}

/** Angle class from the number of class 1 bonds that form it (0, 1, 2) and the size of the ring that holds it (3, 4 or 0). */
export function angleClass(singleBonds: number, ringSize: 0 | 3 | 4): number {
  if (ringSize === 0) return singleBonds;
  if (singleBonds === 0) return ringSize;
  return (ringSize === 3 ? 4 : 6) + singleBonds;
}

/** Size of the small ring (3 or 4) that holds the angle, 0 if there is none. */
export function smallRingOfAngle({ form: { molecule }, rings }: AtomTyping, i: number, j: number, k: number): 0 | 3 | 4 {
  if (rings.ofAtom[j].length === 0) return 0;
  if (bondBetween(molecule, i, k) >= 0) return 3;
  // any cycle of four counts, those too that two three-membered rings add up to
  return neighboursOf(molecule, i).some((m) => m !== j && bondBetween(molecule, m, k) >= 0) ? 4 : 0;
}

/** Stretch-bend class from the classes of the bonds i-j and j-k and of the angle; i is the end with the lower type. */
export function stretchBendClass(class_ij: number, class_jk: number, angle: number): number {
  const first = class_ij >= class_jk ? 0 : 1;
  switch (angle) {
    case 1:
      return 1 + first;
    case 2:
      return 3;
    case 4:
      return 4;
    case 3:
      return 5;
    case 5:
      return 6 + first;
    case 6:
      return 8;
    case 7:
      return 9 + first;
    case 8:
      return 11;
    default:
      return 0;
  }
}

/**
 * Torsion class: 4 in a four-membered ring; 1 about a class 1 bond; 2 about a single bond that stands next to one; 5 in a saturated
 * five-membered ring (one with an sp3 carbon among the four atoms); else 0.
 */
export function torsionClass(typing: AtomTyping, classes: Uint8Array, i: number, j: number, k: number, l: number): number {
  const { form, atomTypes, rings, aromaticity } = typing;
  const { molecule } = form;
  if (shareRing(rings, 4, i, j, k, l)) return 4;
  const axis = bondBetween(molecule, j, k);
  if (classes[axis] === 1) return 1;
  const nextToClass1 = classes[bondBetween(molecule, i, j)] === 1 || classes[bondBetween(molecule, k, l)] === 1;
  if (nextToClass1 && form.order[axis] === 1 && !aromaticity.bonds[axis]) return 2;
  const saturated =
    atomTypes[i] === ALKYL_CARBON || atomTypes[j] === ALKYL_CARBON || atomTypes[k] === ALKYL_CARBON || atomTypes[l] === ALKYL_CARBON;
  return saturated && shareRing(rings, 5, i, j, k, l) ? 5 : 0;
}
