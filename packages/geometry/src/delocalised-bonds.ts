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

/** Atoms of the longest cycle looked for one by one, and steps that one bond may cost. */
const LONGEST_CYCLE = 30;
const STEPS = 3000;

/** Whether an alternating cycle of 4n+2 bonds runs through the bond between a and b; looked for depth first, within bounds. */
function hasHuckelCycle({ mate, around }: DoubleBondMatching, a: number, b: number): boolean {
  const [p, q] = [mate[a], mate[b]];
  if (p < 0 || q < 0) return false;
  // a cycle enters and leaves each double bond by its two ends: from the far end `from` by single bonds round to `to`
  const [from, to] = p === b ? [b, a] : [q, p];
  const visited = new Uint8Array(mate.length);
  for (const i of [a, b, p, q]) visited[i] = 1;
  let steps = 0;
  const extend = (at: number, length: number): boolean => {
    if (length > LONGEST_CYCLE || ++steps > STEPS) return false;
    for (const next of around[at]) {
      if (next === mate[at]) continue;
      if (next === to && length % 4 === 2) return true;
      if (visited[next] || visited[mate[next]]) continue;
      visited[next] = visited[mate[next]] = 1;
      if (extend(mate[next], length + 2)) return true;
      visited[next] = visited[mate[next]] = 0;
    }
    return false;
  };
  return extend(from, p === b ? 2 : 4);
}

/**
 * Marks (1 a bond) the ring bonds that are equally well written single or double, over the atoms that `takesPart` lets in: those on an
 * alternating cycle. In a system that also has cycles of 4n bonds only the bonds on a cycle of 4n+2 are marked.
 */
export function delocalisedBonds(molecule: Molecule, takesPart: (atom: number) => boolean): Uint8Array {
  const { bonds, neighbours } = molecule;
  const matching = doubleBondMatching(molecule, takesPart);
  const marks = new Uint8Array(bonds.count);
  const length = new Int32Array(bonds.count);
  const inRing = ringBonds(molecule);
  for (let n = 0; n < bonds.count; n++) {
    if (inRing[n]) length[n] = alternatingCycle(matching, bonds.a[n], bonds.b[n]);
    if (length[n] > 0) marks[n] = 1;
  }
  // a bond that alternates along 4n bonds casts doubt on the system it belongs to
  const doubtful = Array.from(length.keys()).filter((n) => length[n] > 0 && length[n] % 4 === 0);
  const seen = new Set(doubtful);
  for (const n of doubtful)
    for (const atom of [bonds.a[n], bonds.b[n]])
      for (let m = neighbours.start[atom]; m < neighbours.start[atom + 1]; m++) {
        const next = neighbours.bond[m];
        if (length[next] === 0 || seen.has(next)) continue;
        seen.add(next);
        doubtful.push(next);
      }
  for (const n of doubtful) marks[n] = hasHuckelCycle(matching, bonds.a[n], bonds.b[n]) ? 1 : 0;
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
