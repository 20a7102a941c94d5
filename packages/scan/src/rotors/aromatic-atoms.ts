/**
 * Which atoms belong to an aromatic ring, in the sense in which a chemist says aryl.
 *
 * Hueckel's rule on each ring of five to seven atoms and on each pair of fused ones: planar-capable atoms all round with 4n + 2 pi
 * electrons. An atom with a double bond to a ring atom gives one, a heteroatom or carbanion without a double bond two, boron, a
 * carbocation and a carbon of an exocyclic C=O, C=N or C=S none; any other exocyclic double bond breaks the ring.
 * Source: E. Hueckel, Z. Phys. 70, 204 (1931).
 */
import { type Molecule, neighboursOf } from '@tordial/geometry';

/** 1 for each atom of an aromatic ring. */
export function aromaticAtoms(
  molecule: Pick<Molecule, 'atomCount' | 'atomicNumbers' | 'formalCharges' | 'neighbours' | 'bonds' | 'rings'>,
): Uint8Array {
  const { atomCount, atomicNumbers, formalCharges, neighbours, bonds, rings } = molecule;
  const aromatic = new Uint8Array(atomCount);
  const inRing = new Uint8Array(atomCount);
  for (const ring of rings) for (const i of ring) inRing[i] = 1;
  const electrons = Int8Array.from(aromatic, (_, i) => (inRing[i] ? piElectrons(i) : -1));

  const candidates = rings.filter((ring) => ring.length >= 5 && ring.length <= 7 && ring.every((i) => electrons[i] >= 0));
  for (const ring of candidates) mark(ring);
  for (let p = 0; p < candidates.length; p++)
    for (let q = 0; q < p; q++) {
      const fused = candidates[q].filter((i) => candidates[p].includes(i));
      if (fused.length === 2) mark(new Set([...candidates[p], ...candidates[q]]));
    }
  return aromatic;

  function mark(atoms: Iterable<number>): void {
    let sum = 0;
    for (const i of atoms) sum += electrons[i];
    if (sum % 4 === 2) for (const i of atoms) aromatic[i] = 1;
  }

  /** -1 where the atom cannot take part. */
  function piElectrons(i: number): number {
    const z = atomicNumbers[i];
    const degree = neighboursOf(molecule, i).length;
    let doubles = 0;
    let within = false;
    let exocyclicHetero = false;
    for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) {
      const order = bonds.order[neighbours.bond[n]];
      if (order === 3) return -1;
      if (order !== 2) continue;
      doubles++;
      const partner = neighbours.atom[n];
      within ||= inRing[partner] === 1;
      exocyclicHetero ||= !inRing[partner] && [7, 8, 16, 34].includes(atomicNumbers[partner]);
    }
    if (doubles > 1) return -1;
    if (doubles === 1) {
      if (within) return degree <= 3 ? 1 : -1;
      return z === 6 && exocyclicHetero ? 0 : -1;
    }
    if (z === 6) return degree === 3 && formalCharges[i] !== 0 ? (formalCharges[i] < 0 ? 2 : 0) : -1;
    if (z === 5) return degree === 3 ? 0 : -1;
    if (z === 7 || z === 15) return degree === 3 && formalCharges[i] === 0 ? 2 : degree === 2 && formalCharges[i] === -1 ? 2 : -1;
    return [8, 16, 34, 52].includes(z) && degree === 2 ? 2 : -1;
  }
}
