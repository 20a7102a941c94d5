/**
 * Symmetry of the molecular graph: the permutations of its atoms that keep elements, isotopes and connectivity.
 *
 * A chain of pointwise stabilisers gives the group as a short list of generators and every element exactly once as a product of
 * coset representatives. Source: C. C. Sims, in Computational Problems in Abstract Algebra (1970), 169.
 *
 * Bond orders and charges take no part, as in `symmetryClasses`: atoms that differ only in how resonance is written are equivalent.
 */
import { type Molecule, neighboursOf, type StereoTable } from './molecule.js';

/** One permutation: atom i goes where atom `image[i]` is. */
export interface Automorphism {
  readonly image: Int32Array;
  /** Every stated stereocentre, double bond and axis lands on one of the same sense. */
  readonly preservesStereo: boolean;
  /** Every stated centre and axis lands on one of the opposite sense, double bonds on equal ones: the mirror image relabelled. */
  readonly invertsStereo: boolean;
}

export interface AutomorphismOptions {
  /** Permutations listed at most. */
  readonly limit?: number;
  /**
   * Atoms that follow the one they sit on in ascending order instead of being permuted themselves: its `hydrogens` (default), all
   * `terminal atoms` (fluorines of CF3, oxygens of a nitro group too), or `none`, which counts a methyl six times.
   */
  readonly following?: 'hydrogens' | 'terminal atoms' | 'none';
}

export interface AutomorphismGroup {
  /** The identity first, then in an order fixed by the atom numbering. */
  readonly automorphisms: readonly Automorphism[];
  /** Whether `automorphisms` holds the whole group. */
  readonly complete: boolean;
  /** Permutations in the whole group (a floating-point number: it can be huge). */
  readonly order: number;
  /** A few permutations whose products make up the whole group, complete whatever the limit. */
  readonly generators: readonly Automorphism[];
}

type SymmetricGraph = Pick<Molecule, 'atomCount' | 'atomicNumbers' | 'isotopes' | 'neighbours' | 'symmetryClasses' | 'stereo'>;

/** The automorphisms of a molecule's graph, up to `limit` (1000) of them. */
export function automorphisms(molecule: SymmetricGraph, options: AutomorphismOptions = {}): AutomorphismGroup {
  const { limit = 1000, following = 'hydrogens' } = options;
  const follows = followers(molecule, following);
  const levels = stabiliserChain(molecule, follows);

  const elements: Int32Array[] = [Int32Array.from({ length: molecule.atomCount }, (_, i) => i)];
  // innermost level first: a product of coset representatives reaches each element once
  for (const transversal of levels.toReversed()) {
    const inner = elements.length;
    for (const coset of transversal)
      for (let n = 0; n < inner && elements.length < limit; n++) elements.push(elements[n].map((i) => coset[i]));
  }
  const order = levels.reduce((product, transversal) => product * (transversal.length + 1), 1);
  const withStereo = (image: Int32Array): Automorphism => ({ image, ...stereoEffect(molecule.stereo, image) });
  return {
    automorphisms: elements.map(withStereo),
    complete: elements.length === order,
    order,
    generators: levels.flat().map(withStereo),
  };
}

export interface OrbitOptions {
  /** Atoms that stay where they are. */
  readonly fixed?: readonly number[];
  /** Count only permutations that keep every stated stereocentre, double bond and axis (default), or all of them. */
  readonly stereo?: 'kept' | 'ignored';
}

/**
 * Atoms that a permutation takes into each other share a number, that of their lowest member; sharper than `symmetryClasses`, exact also
 * for regular graphs and with atoms held fixed. Where stereo is kept and the group has more than 4096 elements, some equivalent
 * atoms may be told apart.
 */
export function atomOrbits(molecule: SymmetricGraph, { fixed = [], stereo = 'kept' }: OrbitOptions = {}): Int32Array {
  const held = molecule.symmetryClasses.slice();
  const follows = followers(molecule, 'terminal atoms');
  const isFixed = new Uint8Array(molecule.atomCount);
  for (const atom of fixed) isFixed[atom] = 1;
  // holding a terminal atom holds the atom it goes with
  fixed.forEach((atom, n) => {
    held[follows[atom] ? neighboursOf(molecule, atom)[0] : atom] = molecule.atomCount + n;
  });
  const open = { ...molecule, symmetryClasses: held };
  const free = stereo === 'ignored' || !hasStereo(molecule.stereo);
  const { automorphisms: list, generators } = automorphisms(open, { limit: free ? 1 : 4096, following: 'terminal atoms' });
  const orbit = Int32Array.from({ length: molecule.atomCount }, (_, i) => i);
  const join = (i: number, j: number): void => {
    const from = Math.max(orbit[i], orbit[j]);
    const to = Math.min(orbit[i], orbit[j]);
    if (from !== to) for (let n = 0; n < orbit.length; n++) if (orbit[n] === from) orbit[n] = to;
  };
  for (const { image, preservesStereo } of [...generators, ...list])
    if (free || preservesStereo) for (let i = 0; i < image.length; i++) join(i, image[i]);
  // atoms that follow the same one never change places above
  for (let i = 0; i < molecule.atomCount; i++)
    if (follows[i] && !isFixed[i])
      for (const j of neighboursOf(molecule, neighboursOf(molecule, i)[0]))
        if (follows[j] && held[i] === held[j] && !isFixed[j]) join(i, j);
  return orbit;
}

const hasStereo = ({ tetrahedral, doubleBonds, axes }: StereoTable): boolean => tetrahedral.length + doubleBonds.length + axes.length > 0;

/** 1 for each atom that goes wherever the one it sits on goes. */
function followers(molecule: SymmetricGraph, following: 'hydrogens' | 'terminal atoms' | 'none'): Uint8Array {
  const { atomCount, atomicNumbers } = molecule;
  return Uint8Array.from({ length: atomCount }, (_, i) => {
    const around = neighboursOf(molecule, i);
    if (following === 'none' || around.length !== 1) return 0;
    const hydrogen = atomicNumbers[i] === 1 && atomicNumbers[around[0]] !== 1;
    return hydrogen || (following === 'terminal atoms' && neighboursOf(molecule, around[0]).length > 1) ? 1 : 0;
  });
}

/** For each level one permutation to every other image its base atom can take while all earlier base atoms stay. */
function stabiliserChain(molecule: SymmetricGraph, follows: Uint8Array): Int32Array[][] {
  const { atomCount, symmetryClasses } = molecule;
  const base = connectedOrder(molecule, follows);
  const image = new Int32Array(atomCount).fill(-1);
  const taken = new Uint8Array(atomCount);
  const levels: Int32Array[][] = [];

  for (let level = 0; level < base.length; level++) {
    const atom = base[level];
    const found: Int32Array[] = [];
    for (const candidate of candidates(level)) {
      if (candidate === atom || !fits(atom, candidate)) continue;
      assign(atom, candidate);
      if (extend(level + 1)) found.push(complete());
      for (let n = level; n < base.length; n++) release(base[n]);
    }
    if (found.length > 0) levels.push(found);
    assign(atom, atom);
  }
  return levels;

  function assign(atom: number, target: number): void {
    image[atom] = target;
    taken[target] = 1;
  }
  function release(atom: number): void {
    if (image[atom] < 0) return;
    taken[image[atom]] = 0;
    image[atom] = -1;
  }
  /** Atoms that could stand for the base atom of a level: neighbours of an image where one neighbour has its image already. */
  function candidates(level: number): Int32Array {
    const anchor = neighboursOf(molecule, base[level]).find((j) => image[j] >= 0);
    return anchor === undefined ? base : neighboursOf(molecule, image[anchor]);
  }
  function fits(atom: number, target: number): boolean {
    if (taken[target] || follows[target] || symmetryClasses[atom] !== symmetryClasses[target]) return false;
    const around = neighboursOf(molecule, target);
    for (const j of neighboursOf(molecule, atom)) if (image[j] >= 0 && !around.includes(image[j])) return false;
    return true;
  }
  function extend(level: number): boolean {
    if (level === base.length) return true;
    const atom = base[level];
    for (const candidate of candidates(level)) {
      if (!fits(atom, candidate)) continue;
      assign(atom, candidate);
      if (extend(level + 1)) return true;
      release(atom);
    }
    return false;
  }
  function complete(): Int32Array {
    const whole = image.slice();
    for (let i = 0; i < atomCount; i++) {
      if (follows[i]) continue;
      const own = followersOf(i);
      const others = followersOf(image[i]);
      own.forEach((j, n) => {
        whole[j] = others[n];
      });
    }
    return whole;
  }
  function followersOf(i: number): Int32Array {
    return neighboursOf(molecule, i)
      .filter((j) => follows[j] === 1)
      .sort((p, q) => symmetryClasses[p] - symmetryClasses[q] || p - q);
  }
}

/** The atoms that do not follow another, each after one of its neighbours as far as fragments allow, lowest index first. */
function connectedOrder(molecule: SymmetricGraph, follows: Uint8Array): Int32Array {
  const order = new Set<number>();
  for (let start = 0; start < molecule.atomCount; start++) {
    if (follows[start] || order.has(start)) continue;
    const fragment = new Set([start]);
    for (const i of fragment) for (const j of neighboursOf(molecule, i)) if (!follows[j]) fragment.add(j);
    for (const i of fragment) order.add(i);
  }
  return Int32Array.from(order);
}

/** What the relabelling `image` does to the stereochemistry of a table, which must know every neighbour it names. */
export function stereoEffect(stereo: StereoTable, image: Int32Array): Pick<Automorphism, 'preservesStereo' | 'invertsStereo'> {
  let preservesStereo = true;
  let invertsStereo = true;
  const compare = (here: number, there: number | undefined): void => {
    if (here !== there) preservesStereo = false;
    if (here !== (there === undefined ? undefined : -there || 0)) invertsStereo = false;
  };
  const centres = new Map(stereo.tetrahedral.map((centre) => [centre.atom, centre]));
  for (const centre of stereo.tetrahedral) {
    const moved = centre.neighbours.map((i) => (i < 0 ? i : image[i]));
    const target = centres.get(image[centre.atom]);
    compare(centre.sign * parity(moved, target?.neighbours ?? []) || 0, target?.sign);
  }
  const doubleBonds = new Map(stereo.doubleBonds.map((bond) => [key(bond.a, bond.b), bond]));
  for (const bond of stereo.doubleBonds) {
    const target = doubleBonds.get(key(image[bond.a], image[bond.b]));
    const kept = target && bond.cis === (target.cis === null ? null : target.cis === (sameEnds(bond, target, image) === 1));
    if (!kept) preservesStereo = invertsStereo = false;
  }
  const axes = new Map(stereo.axes.map((axis) => [key(axis.a, axis.b), axis]));
  for (const axis of stereo.axes) {
    const target = axes.get(key(image[axis.a], image[axis.b]));
    compare(axis.sign * (target ? sameEnds(axis, target, image) : 1) || 0, target?.sign);
  }
  return { preservesStereo, invertsStereo };
}

const key = (a: number, b: number): string => (a < b ? `${a} ${b}` : `${b} ${a}`);

/** 1 when an even number of reference substituents (both or none) land on the reference substituents, -1 otherwise. */
function sameEnds(
  from: { a: number; substituentA: number; substituentB: number },
  to: { a: number; substituentA: number; substituentB: number },
  image: Int32Array,
): 1 | -1 {
  const straight = image[from.a] === to.a;
  const atA = image[straight ? from.substituentA : from.substituentB] === to.substituentA;
  const atB = image[straight ? from.substituentB : from.substituentA] === to.substituentB;
  return atA === atB ? 1 : -1;
}

/** Parity of the permutation that sorts `row` into the order of `target`, 0 when they hold different values. */
function parity(row: readonly number[], target: readonly number[]): number {
  const places = row.map((value) => target.indexOf(value));
  if (places.includes(-1)) return 0;
  let sign = 1;
  for (let p = 0; p < places.length; p++) for (let q = 0; q < p; q++) if (places[q] > places[p]) sign = -sign;
  return sign;
}
