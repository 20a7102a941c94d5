/**
 * Ranking of the substituents of an atom by the Cahn-Ingold-Prelog sequence rules, as far as constitution decides.
 *
 * The hierarchical digraph of the centre is compared sphere by sphere under rule 1a (higher atomic number), rule 1b (a duplicate whose
 * original stands nearer to the centre) and rule 2 (higher atomic mass). The rules on stereo descriptors (3 to 5) are not applied:
 * substituents that differ in configuration alone tie.
 *
 * Sources: R. S. Cahn, C. K. Ingold and V. Prelog, Angew. Chem. Int. Ed. 5, 385 (1966); V. Prelog and G. Helmchen, ibid. 21, 567 (1982);
 * IUPAC Recommendations 2013, P-92. Rule 1b counts ring-closure duplicates only, as R. M. Hanson et al., J. Chem. Inf. Model. 58, 1755
 * (2018) have it. Where a ring can be written with its double bonds in several ways, a duplicate takes the mean atomic number over
 * the partners the atom may have (P-92.1.4.2.2), so that a rank does not depend on which way is written.
 */
import { isotopeMass } from './elements.js';
import { type Molecule, neighboursOf } from './molecule.js';

type RankedGraph = Pick<Molecule, 'atomCount' | 'atomicNumbers' | 'isotopes' | 'bonds' | 'neighbours' | 'symmetryClasses'>;

/** A digraph that grows beyond this many compared pairs (cages, large fused systems) is decided by the symmetry classes. */
const COMPARISON_LIMIT = 20_000;

interface Node {
  /** -1 for a duplicate. */
  readonly atom: number;
  readonly parent: Node | null;
  readonly depth: number;
  readonly atomicNumber: number;
  readonly mass: number;
  /** Distance from the centre of the atom that a ring-closure duplicate stands for; -1 for any other node. */
  readonly originalDepth: number;
  /** Null until asked for. */
  children: Node[] | null;
  /** The rule up to which the children are in order, -1 as long as they are not. */
  sortedUnder: number;
}

/**
 * The neighbours of `centre` by falling priority, in groups: those that constitution cannot tell apart share one, ascending by index.
 * The result depends on the molecule, not on the order of its atoms.
 */
export function cipPriority(molecule: RankedGraph, centre: number): Int32Array[] {
  const partners = doubleBondPartners(molecule);
  const root = real(molecule, centre, null, 0);
  const branches = Array.from(neighboursOf(molecule, centre), (atom) => real(molecule, atom, root, 1));
  const groups: Node[][] = [];
  for (const branch of branches) {
    const at = groups.findIndex(([first]) => compareBranches(molecule, partners, first, branch) <= 0);
    if (at < 0) groups.push([branch]);
    else if (compareBranches(molecule, partners, groups[at][0], branch) === 0) groups[at].push(branch);
    else groups.splice(at, 0, [branch]);
  }
  return groups.map((group) => Int32Array.from(group, ({ atom }) => atom).sort());
}

type Rule = (p: Node, q: Node) => number;

const RULES: readonly Rule[] = [(p, q) => p.atomicNumber - q.atomicNumber, (p, q) => nearness(p) - nearness(q), (p, q) => p.mass - q.mass];

/** Higher for a duplicate of an atom nearer to the centre; every other node stands below all ring-closure duplicates. */
function nearness({ originalDepth }: Node): number {
  return originalDepth < 0 ? -MAXIMUM_DEPTH : -originalDepth;
}

const MAXIMUM_DEPTH = 1e6;

/** Positive when branch p ranks above branch q. */
function compareBranches(molecule: RankedGraph, partners: readonly (readonly number[])[], p: Node, q: Node): number {
  let budget = COMPARISON_LIMIT;
  const outcome = compare(p, q, RULES.length - 1);
  return budget >= 0 && outcome !== 0 ? outcome : molecule.symmetryClasses[p.atom] - molecule.symmetryClasses[q.atom];

  /** One rule after the other, each on the whole of both branches; 0 when they tie or the budget is spent. */
  function compare(a: Node, b: Node, lastRule: number): number {
    for (let rule = 0; rule <= lastRule; rule++) {
      const outcome = compareUnder(rule, a, b);
      if (outcome !== 0) return outcome;
    }
    return 0;
  }
  /** Sphere by sphere, in each sphere set by set in the order of the branches they sit on. */
  function compareUnder(rule: number, first: Node, second: Node): number {
    const difference = RULES[rule];
    const own = difference(first, second);
    if (own !== 0) return own;
    const queue: [Node, Node][] = [[first, second]];
    for (const [a, b] of queue) {
      if (--budget < 0) return 0;
      const left = descend(a, rule);
      const right = descend(b, rule);
      for (let n = 0; n < Math.min(left.length, right.length); n++) {
        const outcome = difference(left[n], right[n]);
        if (outcome !== 0) return outcome;
      }
      if (left.length !== right.length) return left.length - right.length;
      left.forEach((child, n) => {
        if (child.atom >= 0 || right[n].atom >= 0) queue.push([child, right[n]]);
      });
    }
    return 0;
  }
  /** Children by falling priority. */
  function descend(node: Node, rule: number): Node[] {
    const children = node.children ?? expand(molecule, partners, node);
    node.children = children;
    if (children.length < 2 || node.sortedUnder >= rule) return children;
    const sorted = children.toSorted((a, b) => compare(b, a, rule));
    // an order that the spent budget cut short must not stay
    if (budget < 0) return sorted;
    node.children = sorted;
    node.sortedUnder = rule;
    return sorted;
  }
}

function real({ atomicNumbers, isotopes }: RankedGraph, atom: number, parent: Node | null, depth: number): Node {
  const atomicNumber = atomicNumbers[atom];
  return {
    atom,
    parent,
    depth,
    atomicNumber,
    mass: isotopeMass(atomicNumber, isotopes[atom]),
    originalDepth: -1,
    children: null,
    sortedUnder: -1,
  };
}

/** Neighbours of a node away from the centre: atoms, duplicates where a ring closes on the path, duplicates for multiple bonds. */
function expand(molecule: RankedGraph, partners: readonly (readonly number[])[], node: Node): Node[] {
  const children: Node[] = [];
  if (node.atom < 0) return children;
  const { neighbours, atomicNumbers } = molecule;
  const depth = node.depth + 1;
  const duplicate = (atomicNumber: number, originalDepth: number): Node => ({
    atom: -1,
    parent: node,
    depth,
    atomicNumber,
    mass: isotopeMass(Math.round(atomicNumber), 0),
    originalDepth,
    children: [],
    sortedUnder: RULES.length,
  });
  for (let n = neighbours.start[node.atom]; n < neighbours.start[node.atom + 1]; n++) {
    const atom = neighbours.atom[n];
    if (atom !== node.parent?.atom) {
      const original = onPath(node, atom);
      children.push(original ? duplicate(atomicNumbers[atom], original.depth) : real(molecule, atom, node, depth));
    }
    // a bond whose place can shift is counted once for the atom, below
    for (let m = 1; m < countedOrder(molecule, neighbours.bond[n]); m++)
      if (partners[node.atom].length < 2) children.push(duplicate(atomicNumbers[atom], -1));
  }
  const shifting = partners[node.atom];
  if (shifting.length > 1) children.push(duplicate(shifting.reduce((sum, atom) => sum + atomicNumbers[atom], 0) / shifting.length, -1));
  return children;
}

/** Order of a bond, 1 at an atom beyond neon with three and more neighbours: P=O and S=O count as P-O and S-O, d orbitals being left out. */
function countedOrder({ atomicNumbers, bonds, neighbours }: RankedGraph, bond: number): number {
  const hypervalent = (i: number) => atomicNumbers[i] > 10 && neighbours.start[i + 1] - neighbours.start[i] > 2;
  return hypervalent(bonds.a[bond]) || hypervalent(bonds.b[bond]) ? 1 : bonds.order[bond];
}

function onPath(node: Node, atom: number): Node | null {
  for (let at: Node | null = node.parent; at !== null; at = at.parent) if (at.atom === atom) return at;
  return null;
}

const ALTERNATION_BUDGET = 4000;

/** For each atom the neighbours that a double bond joins it to in one written structure or another; found along alternating cycles. */
function doubleBondPartners(molecule: RankedGraph): number[][] {
  const { atomCount, bonds, neighbours } = molecule;
  const partner = new Int32Array(atomCount).fill(-1);
  for (let n = 0; n < bonds.count; n++) {
    if (countedOrder(molecule, n) !== 2) continue;
    // cumulated bonds do not shift
    const taken = partner[bonds.a[n]] !== -1 || partner[bonds.b[n]] !== -1;
    for (const [i, j] of [
      [bonds.a[n], bonds.b[n]],
      [bonds.b[n], bonds.a[n]],
    ])
      partner[i] = taken ? -2 : j;
  }
  const found: number[][] = Array.from(partner, (j) => (j >= 0 ? [j] : []));
  const visited = new Uint8Array(atomCount);
  for (let n = 0; n < bonds.count; n++) {
    const u = bonds.a[n];
    const v = bonds.b[n];
    if (bonds.order[n] !== 1 || partner[u] < 0 || partner[v] < 0) continue;
    let budget = ALTERNATION_BUDGET;
    visited.fill(0);
    for (const atom of [u, v, partner[u], partner[v]]) visited[atom] = 1;
    if (!reaches(partner[v], partner[u])) continue;
    found[u].push(v);
    found[v].push(u);

    function reaches(from: number, goal: number): boolean {
      if (--budget < 0) return false;
      for (let m = neighbours.start[from]; m < neighbours.start[from + 1]; m++) {
        const next = neighbours.atom[m];
        if (bonds.order[neighbours.bond[m]] !== 1) continue;
        if (next === goal) return true;
        const beyond = partner[next];
        if (beyond < 0 || visited[next] || visited[beyond]) continue;
        visited[next] = visited[beyond] = 1;
        if (reaches(beyond, goal)) return true;
        visited[next] = visited[beyond] = 0;
      }
      return false;
    }
  }
  return found;
}
