/**
 * Aromatic rings as MMFF94 sees them: rings of five or six atoms with six pi electrons.
 *
 * Each atom of a ring with a double bond in the ring gives one electron. An atom whose double bond leaves the ring gives one if that bond
 * belongs to a ring already found aromatic, otherwise the ring is not aromatic. One atom of a five-membered ring may give a lone pair.
 * The search repeats until no ring is added.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), section on aromatic atom types.
 */
import { bondBetween, type Molecule } from '@tordial/geometry';
import { neighbourByOrder, type ValenceForm } from './valence-form.js';

export interface AromaticRing {
  readonly atoms: Int32Array;
  /** The atom of a five-membered ring that gives a lone pair; -1 in a six-membered ring. */
  readonly lonePairAtom: number;
}

export interface Aromaticity {
  readonly rings: readonly AromaticRing[];
  /** 1 for an atom of an aromatic ring. */
  readonly atoms: Uint8Array;
  /** 1 for a bond of an aromatic ring. */
  readonly bonds: Uint8Array;
}

const NOT_AROMATIC = -2;
const N = 7;
const O = 8;
const S = 16;

/** Finds the aromatic rings of a molecule in the one writing of `valenceForm`. */
export function perceiveAromaticity(form: ValenceForm): Aromaticity {
  const { molecule } = form;
  const atoms = new Uint8Array(molecule.atomCount);
  const bonds = new Uint8Array(molecule.bonds.count);
  const rings: AromaticRing[] = [];
  let candidates = molecule.rings.filter((ring) => ring.length === 5 || ring.length === 6);
  let found: boolean;
  do {
    found = false;
    candidates = candidates.filter((ring) => {
      const lonePairAtom = lonePairOfAromaticRing(form, ring, bonds);
      if (lonePairAtom === NOT_AROMATIC) return true;
      rings.push({ atoms: ring, lonePairAtom });
      for (let n = 0; n < ring.length; n++) {
        atoms[ring[n]] = 1;
        bonds[ringBond(molecule, ring, n)] = 1;
      }
      found = true;
      return false;
    });
  } while (found);
  return { rings, atoms, bonds };
}

/** The atom that gives the lone pair, -1 where none is needed, NOT_AROMATIC where the ring has not six pi electrons. */
function lonePairOfAromaticRing(form: ValenceForm, ring: Int32Array, aromaticBonds: Uint8Array): number {
  const { molecule, element, degree, valence, order } = form;
  let electrons = 0;
  let lonePairAtom = -1;
  for (let n = 0; n < ring.length; n++) {
    const i = ring[n];
    const before = order[ringBond(molecule, ring, (n + ring.length - 1) % ring.length)];
    const after = order[ringBond(molecule, ring, n)];
    const partner = neighbourByOrder(form, i, 2);
    if (before + after === 3 && valence[i] <= 4) electrons += 1;
    else if (before + after > 2) return NOT_AROMATIC;
    else if (partner >= 0) {
      if (aromaticBonds[bondBetween(molecule, i, partner)] === 0) return NOT_AROMATIC;
      electrons += 1;
    } else {
      const hasLonePair =
        (element[i] === N && (valence[i] === 3 || valence[i] === 2)) || ((element[i] === O || element[i] === S) && degree[i] === 2);
      if (!hasLonePair || ring.length !== 5 || lonePairAtom >= 0) return NOT_AROMATIC;
      lonePairAtom = i;
      electrons += 2;
    }
  }
  return electrons === 6 ? lonePairAtom : NOT_AROMATIC;
}

/** Index of the bond from the n-th atom of a ring to the next one. */
function ringBond(molecule: Molecule, ring: Int32Array, n: number): number {
  return bondBetween(molecule, ring[n], ring[(n + 1) % ring.length]);
}
