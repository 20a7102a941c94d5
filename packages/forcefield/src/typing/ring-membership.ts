/** Which atoms share a ring of 3, 4, 5 or 6 members: what bond, angle and torsion classes and several atom types ask. */
import type { Molecule } from '@tordial/geometry';

/** Rings of one size through each atom, as ring indices ascending. */
export interface RingMembership {
  readonly rings: readonly Int32Array[];
  /** Indices into `rings` of the rings of three to five members through each atom. */
  readonly ofAtom: readonly (readonly number[])[];
}

const NONE: readonly number[] = [];

/** Collects the rings of three to five members through each atom. */
export function ringMembership({ rings, atomCount }: Pick<Molecule, 'rings' | 'atomCount'>): RingMembership {
  const ofAtom: (readonly number[])[] = new Array(atomCount).fill(NONE);
  rings.forEach((ring, index) => {
    if (ring.length > 5) return;
    for (const atom of ring) ofAtom[atom] = [...ofAtom[atom], index];
  });
  return { rings, ofAtom };
}

/** Whether atom i lies in a ring of this size (3, 4 or 5). */
export function inRing({ rings, ofAtom }: RingMembership, size: number, i: number): boolean {
  return ofAtom[i].some((ring) => rings[ring].length === size);
}

/** Whether all atoms lie in one ring of this size (3, 4 or 5). */
export function shareRing({ rings, ofAtom }: RingMembership, size: number, i: number, j: number, k = j, l = k): boolean {
  for (const ring of ofAtom[i])
    if (rings[ring].length === size && ofAtom[j].includes(ring) && ofAtom[k].includes(ring) && ofAtom[l].includes(ring)) return true;
  return false;
}
