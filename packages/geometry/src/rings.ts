/**
 * The relevant cycles of a molecular graph: the union of all minimum cycle bases, a set that does not depend on atom numbering.
 *
 * Source: P. Vismara, Electron. J. Combin. 4, R9 (1997). Families of equally long cycles that differ only in their paths are
 * enumerated up to `FAMILY_LIMIT` members; beyond that (large rings of fused rings) one member stands for the family.
 */
import type { MolecularGraph } from './molecule.js';

const FAMILY_LIMIT = 64;

interface Family {
  readonly length: number;
  readonly members: Int32Array[];
}

type BitSet = Uint32Array;

/** Rings as atom indices in ring order, starting at the lowest and going towards the lower of its two neighbours; sorted by length, then by atoms. */
export function relevantCycles({ atomCount, bonds, neighbours }: Pick<MolecularGraph, 'atomCount' | 'bonds' | 'neighbours'>): Int32Array[] {
  const core = cyclicCore(atomCount, neighbours);
  const families: Family[] = [];
  const distance = new Int32Array(atomCount);

  // candidates: odd and even cycles whose highest-ranked atom is the root, made of two shortest paths that meet only there
  for (let root = 0; root < atomCount; root++) {
    if (!core[root]) continue;
    const order = shortestPaths(root);
    for (const y of order) {
      const sameLevelOrUp: number[] = [];
      for (let n = neighbours.start[y]; n < neighbours.start[y + 1]; n++) {
        const z = neighbours.atom[n];
        if (!core[z] || z > root || distance[z] < 0) continue;
        if (distance[z] + 1 === distance[y]) sameLevelOrUp.push(z);
        else if (distance[z] === distance[y] && z < y) addFamily(root, y, z, -1);
      }
      for (let p = 0; p < sameLevelOrUp.length; p++) for (let q = 0; q < p; q++) addFamily(root, sameLevelOrUp[p], sameLevelOrUp[q], y);
    }
  }

  families.sort((p, q) => p.length - q.length);
  const rings = selectRelevant(families).map(canonical);
  return rings.sort((p, q) => p.length - q.length || compare(p, q));

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
        order.push(j);
      }
    return order;
  }

  /** All shortest paths root..end; at most FAMILY_LIMIT. */
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

  function addFamily(root: number, p: number, q: number, apex: number): void {
    const members: Int32Array[] = [];
    for (const left of paths(root, p)) {
      const onLeft = new Set(left);
      for (const right of paths(root, q)) {
        if (right.some((atom, n) => n > 0 && onLeft.has(atom))) continue;
        const back = right.slice(1).reverse();
        members.push(Int32Array.from(apex < 0 ? [...left, ...back] : [...left, apex, ...back]));
        if (members.length === FAMILY_LIMIT) break;
      }
      if (members.length === FAMILY_LIMIT) break;
    }
    if (members.length > 0 && members[0].length > 2) families.push({ length: members[0].length, members });
  }

  /** Keeps the families that are not sums of strictly shorter cycles (elimination over GF(2)). */
  function selectRelevant(sorted: Family[]): Int32Array[] {
    const basis = new Map<number, BitSet>();
    const kept: Int32Array[] = [];
    let pending: BitSet[] = [];
    let length = 0;
    for (const family of sorted) {
      if (family.length > length) {
        for (const row of pending) insert(row);
        pending = [];
        length = family.length;
      }
      const edges = edgeSet(family.members[0]);
      if (reduce(edges.slice()) < 0) continue;
      kept.push(...family.members);
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

  function edgeSet(cycle: Int32Array): BitSet {
    const edges = new Uint32Array((bonds.count + 31) >> 5);
    for (let n = 0; n < cycle.length; n++) {
      const i = cycle[n];
      const j = cycle[(n + 1) % cycle.length];
      for (let m = neighbours.start[i]; m < neighbours.start[i + 1]; m++)
        if (neighbours.atom[m] === j) edges[neighbours.bond[m] >> 5] |= 1 << (neighbours.bond[m] & 31);
    }
    return edges;
  }
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
