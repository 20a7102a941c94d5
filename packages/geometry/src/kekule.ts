/** Places the double bonds of a structure written with aromatic atoms: a maximum matching of the atoms that need one. */
import { TordialError } from './errors.js';
import { augment } from './matching.js';
import { createGraph } from './molecule.js';
import { relevantCycles } from './rings.js';
import { normalValences } from './valence.js';
import { AROMATIC_ORDER, type WrittenAtom, type WrittenBond } from './written-structure.js';

/**
 * Replaces every aromatic order in `bonds` by 1 or 2, in place. Deterministic in the order of atoms and bonds. Double bonds go to rings
 * of five and more where that is possible, so that biphenylene keeps its benzene rings.
 * Throws `molecule/kekule` naming the atoms that are left over.
 */
export function placeAlternatingBonds(atoms: readonly WrittenAtom[], bonds: readonly WrittenBond[]): void {
  const written = bonds.filter((bond) => bond.order === AROMATIC_ORDER);
  const lone = atoms.findIndex((atom, i) => atom.aromatic && !written.some(({ a, b }) => a === i || b === i));
  if (lone >= 0)
    throw new TordialError('molecule/kekule', `${atoms[lone].label} is written as aromatic but is in no aromatic ring`, { atom: lone });
  if (written.length === 0) return;

  const { needs, may } = demands(atoms, bonds);
  const smallestRing = smallestRings(atoms.length, bonds);
  const candidates = bonds.flatMap(({ a, b, order }, n) =>
    order === AROMATIC_ORDER && smallestRing[n] > 0 && (needs[a] || may[a]) && (needs[b] || may[b]) ? [n] : [],
  );
  const edges = (take: (bond: number) => boolean) => candidates.filter(take).map((n) => [bonds[n].a, bonds[n].b] as const);
  const required = (n: number) => needs[bonds[n].a] && needs[bonds[n].b];
  const mate = new Int32Array(atoms.length).fill(-1);
  match(edges((n) => required(n) && smallestRing[n] >= 5));
  if (unmatched() >= 0) match(edges(required));
  if (unmatched() >= 0) match(edges(() => true));
  if (unmatched() >= 0) {
    const left = atoms.filter((_, i) => needs[i] && mate[i] < 0).map((atom) => atom.label);
    throw new TordialError(
      'molecule/kekule',
      `no alternating single and double bonds fit the aromatic ring of ${left.slice(0, 5).join(', ')}; a hydrogen ([nH]) or a charge may be missing`,
      { atom: unmatched() },
    );
  }
  for (const bond of written) bond.order = mate[bond.a] === bond.b ? 2 : 1;

  function unmatched(): number {
    return needs.findIndex((need, i) => need && mate[i] < 0);
  }

  /** Grows the matching along the given edges until no needy atom can gain a partner. */
  function match(pairs: readonly (readonly [number, number])[]): void {
    const around: number[][] = atoms.map(() => []);
    for (const [a, b] of pairs) {
      around[a].push(b);
      around[b].push(a);
    }
    for (const [a, b] of pairs)
      if (mate[a] < 0 && mate[b] < 0 && needs[a] && needs[b]) {
        mate[a] = b;
        mate[b] = a;
      }
    for (let root = 0; root < atoms.length; root++) if (needs[root] && mate[root] < 0) augment(root, around, mate);
  }
}

/** Which atoms need a double bond inside the aromatic system, and which may take one (two-coordinate boron). */
function demands(atoms: readonly WrittenAtom[], bonds: readonly WrittenBond[]): { needs: boolean[]; may: boolean[] } {
  const valence = atoms.map((atom) => Math.max(0, atom.hydrogens));
  for (const { a, b, order } of bonds) {
    const written = order === AROMATIC_ORDER ? 1 : order;
    valence[a] += written;
    valence[b] += written;
  }
  const open = atoms.map(
    ({ atomicNumber, charge, aromatic }, i) => aromatic && !(normalValences(atomicNumber, charge) ?? [valence[i]]).includes(valence[i]),
  );
  const optional = (i: number) => atoms[i].atomicNumber === 5 && atoms[i].charge === 0 && atoms[i].hydrogens < 0;
  return { needs: open.map((is, i) => is && !optional(i)), may: open.map((is, i) => is && optional(i)) };
}

/** Length of the smallest ring through each bond, 0 for a bond in no ring. */
function smallestRings(atomCount: number, bonds: readonly WrittenBond[]): Int32Array {
  const graph = createGraph(
    atomCount,
    bonds.map(({ a, b }) => [a, b, 1] as const),
  );
  const size = new Int32Array(bonds.length);
  for (const ring of relevantCycles({ atomCount, ...graph }))
    ring.forEach((a, n) => {
      const b = ring[(n + 1) % ring.length];
      const row = graph.neighbours;
      for (let m = row.start[a]; m < row.start[a + 1]; m++)
        if (row.atom[m] === b && (size[row.bond[m]] === 0 || ring.length < size[row.bond[m]])) size[row.bond[m]] = ring.length;
    });
  return size;
}
