/**
 * The relevant cycles of a molecular graph: the union of all minimum cycle bases, a set that does not depend on atom numbering.
 *
 * Source: P. Vismara, Electron. J. Combin. 4, R9 (1997). Families of equally long cycles that differ only in their paths are
 * enumerated up to `FAMILY_LIMIT` members; beyond that (large rings of fused rings) one member stands for the family.
 */
import type { MolecularGraph, Molecule } from './molecule.js';

const FAMILY_LIMIT = 64;

/**
 * All cycles made of a shortest path from the root to p, one to q, and the bond p-q (apex -1) or the two bonds p-apex-q. Paths stay on atoms
 * below the root, so that every cycle has one root.
 */
interface Family {
  readonly length: number;
  readonly root: number;
  readonly p: number;
  readonly q: number;
  readonly apex: number;
}

type BitSet = Uint32Array;

/** Rings as atom indices in ring order, starting at the lowest and going towards the lower of its two neighbours; sorted by length, then by atoms. */
export function relevantCycles({ atomCount, bonds, neighbours }: Pick<MolecularGraph, 'atomCount' | 'bonds' | 'neighbours'>): Int32Array[] {
  const core = cyclicCore(atomCount, neighbours);
  const distance = new Int32Array(atomCount);
  const parent = new Int32Array(atomCount);
  const branch = new Int32Array(atomCount);

  // two paths of one shortest-path tree meet only at the root when they leave it by different branches; a family whose tree paths meet
  // further out is a sum of shorter cycles
  const families: Family[] = [];
  for (let root = 0; root < atomCount; root++) {
    if (!core[root]) continue;
    for (const y of shortestPaths(root)) {
      const nearer: number[] = [];
      for (let n = neighbours.start[y]; n < neighbours.start[y + 1]; n++) {
        const z = neighbours.atom[n];
        if (!core[z] || z > root || distance[z] < 0) continue;
        if (distance[z] + 1 === distance[y]) nearer.push(z);
        else if (distance[z] === distance[y] && z < y && branch[z] !== branch[y])
          families.push({ length: 2 * distance[y] + 1, root, p: y, q: z, apex: -1 });
      }
      for (let p = 0; p < nearer.length; p++)
        for (let q = 0; q < p; q++)
          if (branch[nearer[p]] !== branch[nearer[q]])
            families.push({ length: 2 * distance[y], root, p: nearer[p], q: nearer[q], apex: y });
    }
  }
  families.sort((p, q) => p.length - q.length || p.root - q.root);

  const kept = selectRelevant(families).flatMap((family) => {
    if (distance[family.root] !== 0) shortestPaths(family.root);
    return members(family);
  });
  return kept.map(canonical).sort((p, q) => p.length - q.length || compare(p, q));

  /** Distances from the root over core atoms of lower rank, -1 where out of reach; returns the atoms reached, nearest first. */
  function shortestPaths(root: number): number[] {
    distance.fill(-1);
    distance[root] = 0;
    const order = [root];
    for (const i of order)
      for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) {
        const j = neighbours.atom[n];
        if (!core[j] || j > root || distance[j] >= 0) continue;
        distance[j] = distance[i] + 1;
        parent[j] = i;
        branch[j] = i === root ? j : branch[i];
        order.push(j);
      }
    return order;
  }

  /** Shortest paths root..end; at most FAMILY_LIMIT. */
  function paths(root: number, end: number): number[][] {
    if (end === root) return [[root]];
    const found: number[][] = [];
    for (let n = neighbours.start[end]; n < neighbours.start[end + 1]; n++) {
      const before = neighbours.atom[n];
      if (!core[before] || before > root || distance[before] < 0 || distance[before] + 1 !== distance[end]) continue;
      for (const path of paths(root, before)) {
        found.push([...path, end]);
        if (found.length === FAMILY_LIMIT) return found;
      }
    }
    return found;
  }

  /** The cycles of a relevant family: every pair of paths, which can meet only at the root. */
  function members({ root, p, q, apex }: Family): Int32Array[] {
    const found: Int32Array[] = [];
    for (const left of paths(root, p))
      for (const right of paths(root, q)) {
        const back = right.slice(1).reverse();
        found.push(Int32Array.from(apex < 0 ? [...left, ...back] : [...left, apex, ...back]));
        if (found.length === FAMILY_LIMIT) return found;
      }
    return found;
  }

  /** Keeps the families that are not sums of strictly shorter cycles (elimination over GF(2)). */
  function selectRelevant(sorted: readonly Family[]): Family[] {
    const dimension = cycleCount(atomCount, bonds.count, neighbours);
    const basis = new Map<number, BitSet>();
    const kept: Family[] = [];
    let pending: BitSet[] = [];
    let length = 0;
    let root = -1;
    for (const family of sorted) {
      if (family.length > length) {
        for (const row of pending) insert(row);
        pending = [];
        length = family.length;
        // a full basis makes every longer cycle a sum of shorter ones
        if (basis.size === dimension) break;
      }
      if (family.root !== root) {
        root = family.root;
        shortestPaths(root);
      }
      const edges = edgeSet(family);
      if (reduce(edges.slice()) < 0) continue;
      kept.push(family);
      pending.push(edges);
    }
    return kept;

    function reduce(row: BitSet): number {
      for (let word = 0; word < row.length; word++)
        while (row[word] !== 0) {
          const pivot = 32 * word + 31 - Math.clz32(row[word]);
          const base = basis.get(pivot);
          if (!base) return pivot;
          for (let k = word; k < row.length; k++) row[k] ^= base[k];
        }
      return -1;
    }
    function insert(row: BitSet): void {
      const pivot = reduce(row);
      if (pivot >= 0) basis.set(pivot, row);
    }
  }

  /** Bonds of the family's cycle over the tree paths of the current root. */
  function edgeSet({ root, p, q, apex }: Family): BitSet {
    const edges = new Uint32Array((bonds.count + 31) >> 5);
    const mark = (i: number, j: number) => {
      for (let m = neighbours.start[i]; m < neighbours.start[i + 1]; m++)
        if (neighbours.atom[m] === j) edges[neighbours.bond[m] >> 5] |= 1 << (neighbours.bond[m] & 31);
    };
    for (const end of [p, q]) for (let i = end; i !== root; i = parent[i]) mark(i, parent[i]);
    if (apex < 0) mark(p, q);
    else for (const end of [p, q]) mark(apex, end);
    return edges;
  }
}

/** Number of independent cycles: bonds - atoms + fragments. */
function cycleCount(atomCount: number, bondCount: number, neighbours: MolecularGraph['neighbours']): number {
  const seen = new Uint8Array(atomCount);
  let fragments = 0;
  for (let first = 0; first < atomCount; first++) {
    if (seen[first]) continue;
    fragments++;
    seen[first] = 1;
    const reached = [first];
    for (const i of reached)
      for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++)
        if (!seen[neighbours.atom[n]]) {
          seen[neighbours.atom[n]] = 1;
          reached.push(neighbours.atom[n]);
        }
  }
  return bondCount - atomCount + fragments;
}

/**
 * Numbers the ring systems, from 0 in the order of their first atoms, -1 for atoms in none: rings belong together that share an atom or are
 * joined by a double bond.
 */
export function ringSystems({ atomCount, rings, bonds }: Pick<Molecule, 'atomCount' | 'rings' | 'bonds'>): Int32Array {
  const root = Int32Array.from({ length: atomCount }, (_, i) => i);
  const find = (i: number): number => {
    let at = i;
    while (root[at] !== at) at = root[at] = root[root[at]];
    return at;
  };
  const inRing = new Uint8Array(atomCount);
  for (const ring of rings)
    for (const atom of ring) {
      inRing[atom] = 1;
      root[find(atom)] = find(ring[0]);
    }
  for (let n = 0; n < bonds.count; n++)
    if (bonds.order[n] === 2 && inRing[bonds.a[n]] && inRing[bonds.b[n]]) root[find(bonds.a[n])] = find(bonds.b[n]);
  const numbers = new Map<number, number>();
  return Int32Array.from({ length: atomCount }, (_, i) => {
    if (!inRing[i]) return -1;
    const own = numbers.get(find(i)) ?? numbers.size;
    numbers.set(find(i), own);
    return own;
  });
}

/** Marks the atoms that remain after atoms with fewer than two remaining neighbours are stripped again and again. */
function cyclicCore(atomCount: number, neighbours: MolecularGraph['neighbours']): Uint8Array {
  const degree = Int32Array.from({ length: atomCount }, (_, i) => neighbours.start[i + 1] - neighbours.start[i]);
  const core = new Uint8Array(atomCount).fill(1);
  const leaves = [...degree.keys()].filter((i) => degree[i] < 2);
  for (const i of leaves) {
    if (!core[i]) continue;
    core[i] = 0;
    for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++)
      if (core[neighbours.atom[n]] && --degree[neighbours.atom[n]] < 2) leaves.push(neighbours.atom[n]);
  }
  return core;
}

function canonical(cycle: Int32Array): Int32Array {
  const n = cycle.length;
  const first = cycle.indexOf(Math.min(...cycle));
  const step = cycle[(first + 1) % n] < cycle[(first + n - 1) % n] ? 1 : n - 1;
  return cycle.map((_, k) => cycle[(first + k * step) % n]);
}

function compare(p: Int32Array, q: Int32Array): number {
  for (let n = 0; n < p.length; n++) if (p[n] !== q[n]) return p[n] - q[n];
  return 0;
}
