/** Which atom of one structure is which of another, by their graphs: elements and connectivity, bond orders and charges left out. */
import { type Coordinates, covalentRadius, createGraph, distance, type Molecule, neighboursOf } from '@tordial/geometry';

export type AtomGraph = Pick<Molecule, 'atomCount' | 'atomicNumbers' | 'neighbours'>;

/**
 * Mappings of `from` onto `onto`, the identity first where it is one: entry i is the atom of `onto` that atom i of `from` is. At most `limit` are
 * listed; none when the graphs differ.
 */
export function atomMappings(from: AtomGraph, onto: AtomGraph, limit = 2000): Int32Array[] {
  if (from.atomCount !== onto.atomCount || !sameElements(from, onto)) return [];
  const order = connectedOrder(from);
  const image = new Int32Array(from.atomCount).fill(-1);
  const taken = new Uint8Array(from.atomCount);
  const found: Int32Array[] = [];
  // a graph that branches into dead ends without end is given up as not found
  let effort = 2_000_000;
  extend(0);
  return found;

  function extend(level: number): void {
    if (level === order.length) {
      found.push(image.slice());
      return;
    }
    const atom = order[level];
    for (const target of candidates(atom)) {
      if (found.length >= limit || effort-- < 0) return;
      if (!fits(atom, target)) continue;
      image[atom] = target;
      taken[target] = 1;
      extend(level + 1);
      image[atom] = -1;
      taken[target] = 0;
    }
  }
  /** The atom of the same number first, so that the identity comes first. */
  function candidates(atom: number): number[] {
    const anchor = neighboursOf(from, atom).find((j) => image[j] >= 0);
    const open = anchor === undefined ? Array.from({ length: onto.atomCount }, (_, j) => j) : [...neighboursOf(onto, image[anchor])];
    return open.sort((p, q) => Number(q === atom) - Number(p === atom));
  }
  function fits(atom: number, target: number): boolean {
    if (taken[target] || from.atomicNumbers[atom] !== onto.atomicNumbers[target]) return false;
    const [own, theirs] = [neighboursOf(from, atom), neighboursOf(onto, target)];
    return own.length === theirs.length && own.every((j) => image[j] < 0 || theirs.includes(image[j]));
  }
}

/** Atoms each after one of its neighbours as far as fragments allow, heavy atoms before hydrogens. */
function connectedOrder(graph: AtomGraph): number[] {
  const order = new Set<number>();
  for (let start = 0; start < graph.atomCount; start++) {
    if (order.has(start) || (graph.atomicNumbers[start] === 1 && neighboursOf(graph, start).length > 0 && graph.atomCount > 2)) continue;
    order.add(start);
    for (const i of order) for (const j of neighboursOf(graph, i)) if (graph.atomicNumbers[j] !== 1) order.add(j);
  }
  for (let atom = 0; atom < graph.atomCount; atom++) order.add(atom);
  return [...order];
}

function sameElements(p: AtomGraph, q: AtomGraph): boolean {
  const sorted = ({ atomicNumbers }: AtomGraph): string =>
    Array.from(atomicNumbers)
      .sort((a, b) => a - b)
      .join();
  return sorted(p) === sorted(q);
}

/** Bonds where atoms are closer than 1.25 times the sum of their covalent radii; hydrogens keep only their nearest one. */
export function graphOfGeometry(atomicNumbers: Uint8Array, x: Coordinates): AtomGraph {
  const atomCount = atomicNumbers.length;
  const share = (i: number, j: number): number => distance(x, i, j) / (covalentRadius(atomicNumbers[i]) + covalentRadius(atomicNumbers[j]));
  const bonds: [number, number, number][] = [];
  for (let i = 0; i < atomCount; i++)
    for (let j = 0; j < i; j++) {
      if (share(i, j) > 1.25) continue;
      const nearest = (h: number, other: number): boolean =>
        atomicNumbers[h] !== 1 ||
        Array.from({ length: atomCount }, (_, k) => k).every((k) => k === h || k === other || share(h, k) >= share(h, other));
      if (nearest(i, j) && nearest(j, i)) bonds.push([i, j, 1]);
    }
  return { atomCount, atomicNumbers, ...createGraph(atomCount, bonds) };
}
