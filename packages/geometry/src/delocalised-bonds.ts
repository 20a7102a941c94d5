/**
 * Bonds that are single in one way of writing a structure's alternating bonds and double in another.
 *
 * Two ways of writing differ by cycles along which single and double bonds alternate. Along 4n+2 bonds they mean one structure, along 4n
 * (cyclobutadiene, pentalene) two that differ in their bond lengths: M. J. S. Dewar and H. C. Longuet-Higgins, Proc. R. Soc. A 214,
 * 482 (1952).
 */
import { augment } from './matching.js';
import type { Molecule } from './molecule.js';

/** The partner of each atom by a double bond (-1: none), and the neighbours it could alternate with. Atoms with two double bonds take no part. */
export interface DoubleBondMatching {
  readonly mate: Int32Array;
  readonly around: readonly (readonly number[])[];
}

/** The matching of a molecule's double bonds over the atoms that `takesPart` lets in. */
export function doubleBondMatching(
  { atomCount, bonds }: Pick<Molecule, 'atomCount' | 'bonds'>,
  takesPart: (atom: number) => boolean = () => true,
): DoubleBondMatching {
  const mate = new Int32Array(atomCount).fill(-1);
  const doubles = new Uint8Array(atomCount);
  for (let n = 0; n < bonds.count; n++)
    if (bonds.order[n] === 2) {
      doubles[bonds.a[n]]++;
      doubles[bonds.b[n]]++;
    }
  const fits = (i: number) => doubles[i] === 1 && takesPart(i);
  for (let n = 0; n < bonds.count; n++)
    if (bonds.order[n] === 2 && fits(bonds.a[n]) && fits(bonds.b[n])) {
      mate[bonds.a[n]] = bonds.b[n];
      mate[bonds.b[n]] = bonds.a[n];
    }
  const around: number[][] = Array.from({ length: atomCount }, () => []);
  for (let n = 0; n < bonds.count; n++) {
    const [a, b] = [bonds.a[n], bonds.b[n]];
    if (mate[a] < 0 || mate[b] < 0 || bonds.order[n] === 3) continue;
    around[a].push(b);
    around[b].push(a);
  }
  return { mate, around };
}

/** Length of an alternating cycle through the bond between a and b, after which all atoms still have one double bond each; 0 where there is none. */
export function alternatingCycle({ mate, around }: DoubleBondMatching, a: number, b: number): number {
  const [p, q] = [mate[a], mate[b]];
  if (p < 0 || q < 0) return 0;
  const changed = mate.slice();
  let found: boolean;
  if (p === b) {
    // the double bond is taken out: both ends must find other partners
    const without = around.map((row, i) => (i === a ? row.filter((j) => j !== b) : i === b ? row.filter((j) => j !== a) : row));
    changed[a] = changed[b] = -1;
    found = augment(a, without, changed);
  } else {
    // the bond is made double: the former partners must find each other
    const without = around.map((row, i) => (i === a || i === b ? [] : row.filter((j) => j !== a && j !== b)));
    changed[a] = b;
    changed[b] = a;
    changed[p] = changed[q] = -1;
    found = augment(p, without, changed);
  }
  if (!found) return 0;
  let length = 0;
  for (let i = 0; i < mate.length; i++) if (changed[i] !== mate[i]) length++;
  return length;
}

/**
 * Marks (1 a bond) the ring bonds that are equally well written single or double, over the atoms that `takesPart` lets in. In a system
 * with alternating cycles of 4n bonds only the six-membered rings that alternate as written are marked.
 */
export function delocalisedBonds(molecule: Molecule, takesPart: (atom: number) => boolean): Uint8Array {
  const { bonds, rings, neighbours } = molecule;
  const matching = doubleBondMatching(molecule, takesPart);
  const marks = new Uint8Array(bonds.count);
  const length = new Int32Array(bonds.count);
  const inRing = ringBonds(molecule);
  for (let n = 0; n < bonds.count; n++) {
    if (inRing[n]) length[n] = alternatingCycle(matching, bonds.a[n], bonds.b[n]);
    if (length[n] > 0) marks[n] = 1;
  }
  // a bond that alternates along 4n bonds spoils the system it belongs to
  const spoilt = Array.from(length.keys()).filter((n) => length[n] > 0 && length[n] % 4 === 0);
  if (spoilt.length === 0) return marks;
  for (const n of spoilt)
    for (const atom of [bonds.a[n], bonds.b[n]])
      for (let m = neighbours.start[atom]; m < neighbours.start[atom + 1]; m++) {
        const next = neighbours.bond[m];
        if (marks[next] === 0) continue;
        marks[next] = 0;
        spoilt.push(next);
      }
  const bondBetween = (i: number, j: number) => {
    for (let m = neighbours.start[i]; m < neighbours.start[i + 1]; m++) if (neighbours.atom[m] === j) return neighbours.bond[m];
    return -1;
  };
  for (const ring of rings) {
    if (ring.length !== 6) continue;
    const own = [...ring].map((i, n) => bondBetween(i, ring[(n + 1) % 6]));
    const alternates = own.every((bond) => length[bond] > 0) && [...ring].every((i) => ring.includes(matching.mate[i]));
    if (alternates) for (const bond of own) marks[bond] = 1;
  }
  return marks;
}

/** Marks the bonds that lie in rings. */
function ringBonds({ rings, bonds, neighbours }: Molecule): Uint8Array {
  const marks = new Uint8Array(bonds.count);
  for (const ring of rings)
    ring.forEach((i, n) => {
      const j = ring[(n + 1) % ring.length];
      for (let m = neighbours.start[i]; m < neighbours.start[i + 1]; m++) if (neighbours.atom[m] === j) marks[neighbours.bond[m]] = 1;
    });
  return marks;
}
