/**
 * Which rotors of a molecule its symmetry makes equivalent.
 *
 * A permutation of the graph stands for a symmetry of the turning molecule when no part that turning leaves alone is turned over:
 * stated stereocentres and double bonds, and those that become handed once their like substituents are told apart (the CH of an
 * isopropyl group, whose methyls are diastereotopic next to a stereocentre; C=N of acetone oxime). A permutation that inverts all of
 * them leads to the mirror image. Which way round such substituents are numbered is arbitrary, so that only rotors that are
 * equivalent in every such numbering, and in each with or each without reflection, count.
 */
import {
  type AxialStereo,
  automorphisms,
  bondBetween,
  type DoubleBondStereo,
  type Molecule,
  neighboursOf,
  type StereoTable,
  stereoEffect,
  type TetrahedralCentre,
} from '@tordial/geometry';
import { atomShape } from './atom-shape.js';

export interface RotorEquivalence {
  /** Rotors that symmetry makes equivalent share a number; counted from 0 in the order of the list. */
  readonly equivalenceClass: number;
  /** Takes the first rotor of the class to this one: atom i of the molecule plays the part of atom `relabelling[i]`. */
  readonly relabelling: Int32Array;
  /** The relabelling leads to the mirror image, so that this rotor's profile at phi is the first one's at -phi. */
  readonly mirrored: boolean;
}

/** Permutations, and permutations times numberings, looked at; a molecule beyond them has each rotor in a class of its own. */
const GROUP_LIMIT = 4096;
const WORK_LIMIT = 1 << 17;

/** The classes of equivalence of the rotors with these axes. */
export function rotorEquivalence(molecule: Molecule, axes: readonly (readonly [number, number])[]): RotorEquivalence[] {
  const identity = Int32Array.from({ length: molecule.atomCount }, (_, i) => i);
  const apart = axes.map((_, n) => ({ equivalenceClass: n, relabelling: identity, mirrored: false }));
  // the order of the group is known from its generators, before it is listed
  const { order } = automorphisms(molecule, { limit: 1, following: 'terminal atoms' });
  if (axes.length < 2 || order === 1 || order > GROUP_LIMIT) return apart;
  const images = automorphisms(molecule, { limit: GROUP_LIMIT, following: 'terminal atoms' }).automorphisms.map(({ image }) => image);
  const { known, openCentres, openDoubleBonds, openAxes } = handedParts(molecule, images);
  const numberings = 2 ** (openCentres.length + openDoubleBonds.length + openAxes.length);
  if (numberings * images.length > WORK_LIMIT) return apart;

  const rotorOfBond = new Map(axes.map(([a, b], n) => [bondBetween(molecule, a, b), n]));
  const targets = images.map((image) =>
    Int32Array.from(axes, ([a, b]) => rotorOfBond.get(bondBetween(molecule, image[a], image[b])) ?? -1),
  );
  /** Per rotor and numbering: the first rotor of its class, and whether only a mirror image relates the two. */
  const firsts: Int32Array[] = [];
  const mirrors: Uint8Array[] = [];
  for (let numbering = 0; numbering < numberings; numbering++) {
    const first = new Int32Array(axes.length).fill(-1);
    const mirror = new Uint8Array(axes.length);
    const table = numbered(numbering);
    const effects = images.map((image) => stereoEffect(table, image));
    for (let n = 0; n < axes.length; n++) {
      if (first[n] >= 0) continue;
      for (const wanted of [false, true])
        effects.forEach(({ preservesStereo, invertsStereo }, p) => {
          const target = targets[p][n];
          if (target < 0 || first[target] >= 0 || !(wanted ? invertsStereo : preservesStereo)) return;
          first[target] = n;
          mirror[target] = Number(wanted);
        });
    }
    firsts.push(first);
    mirrors.push(mirror);
  }

  const classes = new Map<string, number>();
  const leaders: number[] = [];
  const table = numbered(0);
  const effects = images.map((image) => stereoEffect(table, image));
  return axes.map((_, n) => {
    const key = firsts.map((first, k) => `${first[n]}${mirrors[k][n] === mirrors[0][n] ? '' : '*'}`).join(' ');
    const equivalenceClass = classes.get(key) ?? classes.size;
    if (!classes.has(key)) {
      classes.set(key, equivalenceClass);
      leaders.push(n);
    }
    const leader = leaders[equivalenceClass];
    const mirrored = mirrors[0][leader] !== mirrors[0][n];
    const by = effects.findIndex((effect, p) => targets[p][leader] === n && (mirrored ? effect.invertsStereo : effect.preservesStereo));
    return { equivalenceClass, relabelling: images[by], mirrored };
  });

  /** The table of all handed parts with the open ones set as the bits of `numbering` say. */
  function numbered(numbering: number): StereoTable {
    let bits = numbering;
    const next = (): boolean => {
      const set = (bits & 1) === 1;
      bits >>= 1;
      return set;
    };
    return {
      tetrahedral: [...known.tetrahedral, ...openCentres.map((centre) => ({ ...centre, sign: next() ? (1 as const) : (-1 as const) }))],
      doubleBonds: [...known.doubleBonds, ...openDoubleBonds.map((bond) => ({ ...bond, cis: next() }))],
      axes: [...known.axes, ...openAxes.map((axis) => ({ ...axis, sign: next() ? (1 as const) : (-1 as const) }))],
    };
  }
}

/**
 * Parts that a permutation could turn over. Those whose sense is stated, and those that every permutation leaves in place (their own
 * sense does not matter, only whether it is kept) are known; the others are open.
 */
function handedParts(molecule: Molecule, images: readonly Int32Array[]) {
  const { stereo, atomCount, bonds } = molecule;
  const moves = (...atoms: number[]) => atoms.some((i) => images.some((image) => image[i] !== i));
  const tetrahedral = stereo.tetrahedral.filter(({ sign }) => sign !== 0);
  const doubleBonds = stereo.doubleBonds.filter(({ cis }) => cis !== null);
  const axes = stereo.axes.filter(({ sign }) => sign !== 0);
  const openCentres: TetrahedralCentre[] = [];
  const openDoubleBonds: DoubleBondStereo[] = [];
  const openAxes: AxialStereo[] = [];
  const stated = new Set([...tetrahedral.map(({ atom }) => `${atom}`), ...[...doubleBonds, ...axes].map(({ a, b }) => ends(a, b))]);
  for (let atom = 0; atom < atomCount; atom++) {
    const centre = stated.has(`${atom}`) ? null : handedCentre(molecule, atom);
    if (centre) (moves(atom) ? openCentres : tetrahedral).push(centre);
  }
  for (let n = 0; n < bonds.count; n++) {
    const unit = bonds.order[n] === 2 ? handedDoubleBond(molecule, bonds.a[n], bonds.b[n]) : null;
    if (!unit || stated.has(ends(unit.a, unit.b))) continue;
    stated.add(ends(unit.a, unit.b));
    const { axial, ...part } = unit;
    const fixed = !moves(unit.a, unit.b);
    if (axial) (fixed ? axes : openAxes).push({ ...part, sign: 1 });
    else (fixed ? doubleBonds : openDoubleBonds).push({ ...part, cis: true });
  }
  return { known: { tetrahedral, doubleBonds, axes }, openCentres, openDoubleBonds, openAxes };
}

const ends = (a: number, b: number): string => `${Math.min(a, b)}-${Math.max(a, b)}`;

/** An atom that holds its handedness, once like groups are numbered; like terminal atoms follow either sense. */
function handedCentre(molecule: Molecule, atom: number): TetrahedralCentre | null {
  const around = neighboursOf(molecule, atom);
  const shape = atomShape(molecule, atom);
  const pyramid = shape === 'pyramidal' && molecule.atomicNumbers[atom] > 8;
  if (!(shape === 'tetrahedral' || pyramid) || hasLikeTerminals(molecule, around)) return null;
  return { atom, neighbours: [around[0], around[1], around[2], around[3] ?? -1], sign: 1 };
}

/**
 * A double bond, or a row of cumulated ones, outside small rings, whose ends both have two different or numbered places. `axial`
 * when the ends stand crosswise, as in allene.
 */
function handedDoubleBond(molecule: Molecule, p: number, q: number): (Omit<AxialStereo, 'sign'> & { axial: boolean }) | null {
  if (molecule.rings.some((ring) => ring.length < 8 && ring.includes(p) && ring.includes(q))) return null;
  // from both atoms outwards over linear centres to the ends of the row
  let length = 1;
  const [[a, besideA], [b, besideB]] = [
    [p, q],
    [q, p],
  ].map(([end, beside]) => {
    while (atomShape(molecule, end) === 'linear') {
      const next = neighboursOf(molecule, end).find((j) => j !== beside);
      if (next === undefined) break;
      [end, beside] = [next, end];
      length++;
    }
    return [end, beside];
  });
  const [atA, atB] = [neighboursOf(molecule, a).filter((j) => j !== besideA), neighboursOf(molecule, b).filter((j) => j !== besideB)];
  for (const [end, substituents] of [
    [a, atA],
    [b, atB],
  ] as const) {
    const shape = atomShape(molecule, end);
    if (!(shape === 'planar' || shape === 'bent') || hasLikeTerminals(molecule, substituents)) return null;
  }
  return { a, b, substituentA: atA[0], substituentB: atB[0], axial: length % 2 === 0 };
}

function hasLikeTerminals({ symmetryClasses, neighbours }: Molecule, around: Int32Array): boolean {
  const terminal = around.filter((j) => neighbours.start[j + 1] - neighbours.start[j] === 1);
  return new Set(terminal.map((j) => symmetryClasses[j])).size < terminal.length;
}
