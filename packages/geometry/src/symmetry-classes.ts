/**
 * Classes of topologically equivalent atoms by iterated refinement of neighbourhoods (H. L. Morgan, J. Chem. Doc. 5, 107 (1965)).
 *
 * Bond orders and charges take no part: with every hydrogen an atom, element and connectivity fix them up to resonance,
 * and atoms that differ only in how resonance is written (ortho carbons, the oxygens of a nitro group) are equivalent.
 */
import type { MolecularGraph } from './molecule.js';

/** One class number an atom; equivalent atoms share it. Numbers run from 0 without gaps and do not depend on the order of atoms in the input. */
export function symmetryClasses({
  atomCount,
  atomicNumbers,
  isotopes,
  neighbours,
}: Omit<MolecularGraph, 'bonds' | 'formalCharges'>): Int32Array {
  const degree = (i: number) => neighbours.start[i + 1] - neighbours.start[i];
  let classes = rank(Array.from({ length: atomCount }, (_, i) => `${pad(atomicNumbers[i])} ${pad(isotopes[i])} ${pad(degree(i))}`));
  for (;;) {
    const around = (i: number) =>
      Array.from(neighbours.atom.subarray(neighbours.start[i], neighbours.start[i + 1]), (j) => pad(classes[j]));
    const finer = rank(Array.from(classes, (own, i) => `${pad(own)} ${around(i).sort().join(' ')}`));
    if (Math.max(-1, ...finer) === Math.max(-1, ...classes)) return classes;
    classes = finer;
  }
}

const pad = (value: number): string => String(value).padStart(5, '0');

function rank(keys: readonly string[]): Int32Array {
  const order = new Map([...new Set(keys)].sort().map((key, n) => [key, n]));
  return Int32Array.from(keys, (key) => order.get(key) ?? -1);
}
