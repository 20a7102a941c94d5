/** The local geometry of an atom, as its bonds in the written structure tell it. */
import { bondBetween, type Molecule, neighboursOf } from '@tordial/geometry';

export type AtomShape = 'terminal' | 'linear' | 'bent' | 'planar' | 'pyramidal' | 'tetrahedral' | 'octahedral' | 'other';

type ShapedMolecule = Pick<Molecule, 'atomicNumbers' | 'formalCharges' | 'neighbours' | 'bonds'>;

const PLANAR_WITH_THREE = new Set([5, 13, 31]);

/**
 * The shape around an atom. A nitrogen with three single bonds counts as planar where it is conjugated (amides, anilines, azoles,
 * enamines), as pyramidal otherwise, sulfonamides included; a carbanion likewise.
 */
export function atomShape(molecule: ShapedMolecule, i: number): AtomShape {
  const around = neighboursOf(molecule, i);
  const z = molecule.atomicNumbers[i];
  const doubles = bondsOfOrder(molecule, i, 2);
  switch (around.length) {
    case 0:
    case 1:
      return 'terminal';
    case 2:
      return (z === 6 || z === 7) && (bondsOfOrder(molecule, i, 3) > 0 || doubles > 1) ? 'linear' : 'bent';
    case 3:
      if (PLANAR_WITH_THREE.has(z)) return 'planar';
      if (z === 6 && molecule.formalCharges[i] === 1) return 'planar';
      if (z <= 8 && doubles > 0) return 'planar';
      if (z > 8) return (z === 15 && doubles > 1) || (z === 16 && doubles > 2) ? 'planar' : 'pyramidal';
      return z <= 7 && isConjugated(molecule, i) ? 'planar' : 'pyramidal';
    case 4:
      return 'tetrahedral';
    case 6:
      return 'octahedral';
    default:
      return 'other';
  }
}

/** Number of bonds of a given order at an atom. */
export function bondsOfOrder({ neighbours, bonds }: Pick<Molecule, 'neighbours' | 'bonds'>, i: number, order: number): number {
  let count = 0;
  for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) if (bonds.order[neighbours.bond[n]] === order) count++;
  return count;
}

/** Whether a lone pair on the atom faces a pi system of carbon, nitrogen or boron next to it. */
function isConjugated(molecule: ShapedMolecule, i: number): boolean {
  return neighboursOf(molecule, i).some((j) => {
    const z = molecule.atomicNumbers[j];
    if (z === 5) return neighboursOf(molecule, j).length === 3;
    if (z !== 6 && z !== 7) return false;
    return molecule.bonds.order[bondBetween(molecule, i, j)] === 1 && bondsOfOrder(molecule, j, 2) + bondsOfOrder(molecule, j, 3) > 0;
  });
}
