/**
 * Classes of topologically equivalent atoms by iterated refinement of neighbourhoods (H. L. Morgan, J. Chem. Doc. 5, 107 (1965)).
 *
 * Bond orders and charges take no part: with every hydrogen an atom, element and connectivity fix them up to resonance,
 * and atoms that differ only in how resonance is written (ortho carbons, the oxygens of a nitro group) are equivalent.
 * The sizes of the small rings through an atom do, for they tell apart what equal neighbourhoods cannot: the carbons of
 * cuneane, or those of cyclopropane beside cyclohexane.
 */
import { refine } from './colouring.js';
import type { Molecule } from './molecule.js';

/** Larger rings may be too many to be listed all, which would make the classes depend on numbering. */
const LARGEST_RING = 8;

/** One class number an atom; equivalent atoms share it. Numbers run from 0 without gaps and do not depend on the order of atoms in the input. */
export function symmetryClasses({
  atomCount,
  atomicNumbers,
  isotopes,
  neighbours,
  rings,
}: Pick<Molecule, 'atomCount' | 'atomicNumbers' | 'isotopes' | 'neighbours' | 'rings'>): Int32Array {
  const ringSizes: number[][] = Array.from({ length: atomCount }, () => []);
  for (const ring of rings) if (ring.length <= LARGEST_RING) for (const atom of ring) ringSizes[atom].push(ring.length);
  const keys = Array.from({ length: atomCount }, (_, i) =>
    [atomicNumbers[i], isotopes[i], neighbours.start[i + 1] - neighbours.start[i], ...ringSizes[i]]
      .map((value) => String(value).padStart(3, '0'))
      .join(' '),
  );
  const { colours } = refine({ atomCount, neighbours }, ranks(keys));
  return ranks(Array.from(colours, (colour) => String(colour).padStart(6, '0')));
}

/** Rank of each key among the different ones, from 0. */
function ranks(keys: readonly string[]): Int32Array {
  const order = new Map([...new Set(keys)].sort().map((key, n) => [key, n]));
  return Int32Array.from(keys, (key) => order.get(key) ?? -1);
}
