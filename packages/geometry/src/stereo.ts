/**
 * Which atoms, double bonds and cumulated axes of a molecule are stereogenic.
 *
 * An element of stereo is real when no symmetry of the structure, all other configurations kept, exchanges its ligands oddly. With
 * constitutionally different ligands that is plain; ligands that differ only in configuration, and centres that depend on one another
 * across a ring, are decided by comparing refined colourings of the two exchanged arrangements.
 */

import { makeDefinite, refine } from './colouring.js';
import { cumulatedChains } from './cumulenes.js';
import { alternatingCycle, doubleBondMatching } from './delocalised-bonds.js';
import { elementSymbol } from './elements.js';
import type { Note } from './errors.js';
import { type Molecule, neighboursOf, type StereoTable } from './molecule.js';
import { ringSystems } from './rings.js';
import { LONE_PAIR, type Sign, type StereoElement, systemOf, toTable } from './stereo-elements.js';

/** Rings up to this size cannot turn a bridge inside out. */
const LARGEST_CAGE_RING = 8;

/** Colourings that the question whether an element of a ring is real may cost; when they run out, it counts as real. */
const RING_BUDGET = 24;

/** Rings below this size hold their double bonds cis. */
export const SMALLEST_RING_WITH_TRANS = 8;

/**
 * The stereo table of a molecule, from `molecule.stereo` taken as what the input states: stated elements that are not stereogenic are left
 * out, stereogenic ones that are not stated are added as open (sign 0, cis null).
 */
export function completeStereo(molecule: Molecule): StereoTable {
  const candidates = stereoCandidates(molecule);
  const kept = new Set<StereoElement>();

  // ligands that differ by constitution, then those that differ by the configurations already found, until nothing is added
  const base = molecule.symmetryClasses;
  let colours = base;
  for (let grown = true; grown; ) {
    grown = false;
    for (const element of candidates)
      if (!kept.has(element) && (element.sign !== 0 || !element.onlyIfStated) && distinct(molecule, element, colours)) {
        kept.add(element);
        grown = true;
      }
    if (grown) colours = refine(molecule, base, [...kept]).colours;
  }

  // what is left has equal ligands; in rings such elements depend on one another and are real when some choice of all of them makes them, or
  // elements equivalent to them, so: three choices are tried
  const systems = ringSystems(molecule);
  const definite = [...kept];
  const equal = candidates.filter(
    (element) =>
      !kept.has(element) &&
      (element.sign !== 0 || !element.onlyIfStated) &&
      !exchangesLeaves(molecule, element) &&
      !isCageHead(molecule, element),
  );
  const inRings = equal.filter((element) => systemOf(element, systems) >= 0);
  const real = inRings.filter((_, own) =>
    [1, 2, inRings.length + 1].some((stride) => {
      const sign = (n: number) => (Math.floor((n + 1) / stride) % 2 === 0 ? 1 : -1);
      const dependent = inRings.map((other, n): StereoElement => ({ ...other, sign: sign(n) }));
      return isStereogenic(molecule, dependent[own], { colours, systems, definite, dependent, budget: RING_BUDGET });
    }),
  );
  const ringElements = inRings.filter((element) =>
    real.some((other) => other.kind === element.kind && colours[other.atoms[0]] === colours[element.atoms[0]]),
  );

  // outside rings, stated elements stay when exchanging equal ligands gives another structure
  let stated = equal.filter((element) => element.sign !== 0 && !inRings.includes(element));
  for (let before = -1; stated.length !== before; ) {
    before = stated.length;
    const dependent = [...ringElements, ...stated];
    stated = stated.filter((element) => isStereogenic(molecule, element, { colours, systems, definite, dependent }));
  }
  const listed = new Set([...definite, ...ringElements, ...stated]);
  return toTable(candidates.filter((element) => listed.has(element)));
}

/** Everything in a molecule that could be stereogenic by its valence, all open: what a reader of drawings asks for. */
export function possibleStereo(molecule: Molecule): StereoTable {
  return toTable(stereoCandidates({ ...molecule, stereo: { tetrahedral: [], doubleBonds: [], axes: [] } }));
}

/** A note for each stereocentre, double bond and axis that the input leaves open, naming the atoms; code `stereo/open`. */
export function openStereo(molecule: Molecule): Note[] {
  const name = (i: number) => `${elementSymbol(molecule.atomicNumbers[i])}${i}`;
  const { tetrahedral, doubleBonds, axes } = molecule.stereo;
  const note = (message: string, atom: number): Note => ({ code: 'stereo/open', message, place: { atom } });
  return [
    ...tetrahedral
      .filter((centre) => centre.sign === 0)
      .map((centre) => note(`the stereocentre ${name(centre.atom)} is not specified; one form was chosen`, centre.atom)),
    ...doubleBonds
      .filter((bond) => bond.cis === null)
      .map((bond) => note(`the double bond ${name(bond.a)}=${name(bond.b)} is not specified as cis or trans; one form was chosen`, bond.a)),
    ...axes
      .filter((axis) => axis.sign === 0)
      .map((axis) => note(`the axis ${name(axis.a)}...${name(axis.b)} is not specified; one form was chosen`, axis.a)),
  ];
}

/** Every element that could be stereogenic by its valence, with the sign that the molecule's table states for it. */
function stereoCandidates(molecule: Molecule): StereoElement[] {
  const { atomCount, atomicNumbers, bonds } = molecule;
  const signs = new Map(molecule.stereo.tetrahedral.map((centre) => [centre.atom, centre.sign]));
  const cis = new Map<string, Sign>(molecule.stereo.doubleBonds.map(({ a, b, cis }) => [`${a} ${b}`, cis === null ? 0 : cis ? 1 : -1]));
  const axes = new Map(molecule.stereo.axes.map(({ a, b, sign }) => [`${a} ${b}`, sign]));
  const elements: StereoElement[] = [];
  for (let i = 0; i < atomCount; i++) {
    const sign = signs.get(i) ?? 0;
    const kind = tetrahedralKind(molecule, i, sign !== 0);
    if (kind === 'none') continue;
    const ligands = [...neighboursOf(molecule, i)];
    if (ligands.length === 3) ligands.push(LONE_PAIR);
    elements.push({ kind: 'tetrahedral', atoms: [i], ligands, sign, onlyIfStated: kind === 'onlyIfStated' });
  }
  for (let n = 0; n < bonds.count; n++) {
    if (bonds.order[n] !== 2) continue;
    const [a, b] = [bonds.a[n], bonds.b[n]];
    const ends = [endLigands(molecule, a, b), endLigands(molecule, b, a)];
    if (!ends[0] || !ends[1]) continue;
    const sign = cis.get(`${a} ${b}`) ?? 0;
    const imineHydrogen = ends.some((end) => end?.[1] === LONE_PAIR && atomicNumbers[end[0]] === 1);
    if (smallestRing(molecule, a, b) < SMALLEST_RING_WITH_TRANS) continue;
    if (sign === 0 && canAlternate(molecule, a, b)) continue;
    elements.push({ kind: 'doubleBond', atoms: [a, b], ligands: [...ends[0], ...ends[1]], sign, onlyIfStated: imineHydrogen });
  }
  for (const chain of cumulatedChains(molecule)) {
    const [a, b] = [chain[0], chain[chain.length - 1]];
    const ends = [endLigands(molecule, a, chain[1]), endLigands(molecule, b, chain[chain.length - 2])];
    if (!ends[0] || !ends[1]) continue;
    const isAxis = chain.length % 2 === 1;
    const sign = (isAxis ? axes.get(`${a} ${b}`) : cis.get(`${a} ${b}`)) ?? 0;
    elements.push({ kind: isAxis ? 'axis' : 'doubleBond', atoms: [a, b], ligands: [...ends[0], ...ends[1]], sign, onlyIfStated: false });
  }
  return elements;
}

function tetrahedralKind(molecule: Molecule, i: number, stated: boolean): 'none' | 'always' | 'onlyIfStated' {
  const { atomicNumbers, formalCharges, neighbours, bonds } = molecule;
  const degree = neighbours.start[i + 1] - neighbours.start[i];
  let valence = 0;
  for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) valence += bonds.order[neighbours.bond[n]];
  const charge = formalCharges[i];
  const when = (condition: boolean) => (condition ? 'always' : 'none');
  switch (atomicNumbers[i]) {
    case 5:
    case 6:
    case 14:
    case 32:
    case 50:
      return when(degree === 4);
    case 7:
      if (degree === 3 && charge === 0 && valence === 3) return isHeldNitrogen(molecule, i) ? 'onlyIfStated' : 'none';
      return when(degree === 4);
    case 15:
    case 33:
    case 51:
      return when(degree === 4 || (degree === 3 && valence === 3 && charge === 0));
    case 16:
    case 34:
    case 52:
      return when((degree === 3 && valence + charge === 4) || (degree === 4 && valence + charge === 6));
    default:
      return stated && degree === 4 ? 'onlyIfStated' : 'none';
  }
}

/** A nitrogen that does not invert freely: in a three-membered ring, or at the head of a bicycle whose rings share more than one bond. */
function isHeldNitrogen(molecule: Molecule, i: number): boolean {
  const own = molecule.rings.filter((ring) => ring.includes(i));
  if (own.some((ring) => ring.length === 3)) return true;
  if (!neighboursOf(molecule, i).every((j) => smallestRing(molecule, i, j) < Number.POSITIVE_INFINITY)) return false;
  return own.some((ring, n) => own.slice(0, n).some((other) => ring.filter((atom) => other.includes(atom)).length > 2));
}

/** The two ligands at one end of a double bond; null where the end has no two places for them. */
function endLigands(molecule: Molecule, end: number, other: number): [number, number] | null {
  const { atomicNumbers, neighbours, bonds } = molecule;
  const ligands: number[] = [];
  for (let n = neighbours.start[end]; n < neighbours.start[end + 1]; n++) {
    if (neighbours.atom[n] === other) continue;
    if (bonds.order[neighbours.bond[n]] !== 1) return null;
    ligands.push(neighbours.atom[n]);
  }
  const z = atomicNumbers[end];
  if (ligands.length === 2 && (z === 6 || z === 7 || z === 14 || z === 32)) return [ligands[0], ligands[1]];
  if (ligands.length === 1 && z === 7) return [ligands[0], LONE_PAIR];
  return null;
}

/** Length of the smallest ring that holds a bond; infinity outside rings. */
function smallestRing({ rings }: Molecule, a: number, b: number): number {
  for (const ring of rings) {
    const at = ring.indexOf(a);
    if (at >= 0 && (ring[(at + 1) % ring.length] === b || ring[(at + ring.length - 1) % ring.length] === b)) return ring.length;
  }
  return Number.POSITIVE_INFINITY;
}

/** Whether another way of writing the alternating bonds makes a ring's double bond single (porphyrins, annulenes). */
function canAlternate(molecule: Molecule, a: number, b: number): boolean {
  if (smallestRing(molecule, a, b) === Number.POSITIVE_INFINITY) return false;
  return alternatingCycle(doubleBondMatching(molecule), a, b) > 0;
}

/** Whether the ligands of an element differ in the given colouring. Oxo, hydroxy and oxide on P, S and As exchange protons and count as one. */
function distinct(molecule: Molecule, element: StereoElement, colours: ArrayLike<number>): boolean {
  const colour = (i: number) => (i === LONE_PAIR ? -1 : colours[i]);
  const [p, q, r, s] = element.ligands.map(colour);
  if (element.kind !== 'tetrahedral') return p !== q && r !== s;
  if (p === q || p === r || p === s || q === r || q === s || r === s) return false;
  return element.sign !== 0 || !exchangesProton(molecule, element);
}

function exchangesProton({ atomicNumbers, neighbours }: Molecule, { atoms, ligands }: StereoElement): boolean {
  if (![15, 16, 33, 34].includes(atomicNumbers[atoms[0]])) return false;
  const oxo = (i: number, z: number) => {
    if (i === LONE_PAIR || atomicNumbers[i] !== z) return false;
    for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++)
      if (neighbours.atom[n] !== atoms[0] && atomicNumbers[neighbours.atom[n]] !== 1) return false;
    return true;
  };
  return [8, 16, 34].some((z) => ligands.filter((i) => oxo(i, z)).length > 1);
}

/** Whether two ligands are equal atoms without further neighbours, the commonest case of all. */
function exchangesLeaves({ symmetryClasses: classes, neighbours }: Molecule, { kind, ligands }: StereoElement): boolean {
  const leaf = (i: number) => i >= 0 && neighbours.start[i + 1] - neighbours.start[i] === 1;
  const equal = (p: number, q: number) => leaf(p) && leaf(q) && classes[p] === classes[q];
  if (kind !== 'tetrahedral') return equal(ligands[0], ligands[1]) || equal(ligands[2], ligands[3]);
  return ligands.some((p, n) => ligands.slice(0, n).some((q) => equal(p, q)));
}

interface Surroundings {
  readonly colours: ArrayLike<number>;
  readonly systems: Int32Array;
  /** Elements with different ligands. */
  readonly definite: readonly StereoElement[];
  /** Elements with equal ligands, which may depend on one another. */
  readonly dependent: readonly StereoElement[];
  /** Colourings that may be tried. */
  readonly budget?: number;
}

/**
 * Compares the arrangement as it is with each arrangement that differs by an odd exchange of equal ligands; undecided counts as stereogenic.
 * In a ring only what is definite and the element's own ring system can matter.
 */
function isStereogenic(
  molecule: Molecule,
  element: StereoElement,
  { colours, systems, definite, dependent, budget }: Surroundings,
): boolean {
  const system = systemOf(element, systems);
  const same = (other: StereoElement) => other.kind === element.kind && other.atoms[0] === element.atoms[0];
  const others = [...definite, ...dependent.filter((other) => !same(other) && (system < 0 || systemOf(other, systems) === system))];
  const own = makeDefinite(molecule, marked(molecule, element.ligands), others, systems, budget);
  return oddArrangements(element, colours).every((arrangement) => {
    const exchanged = makeDefinite(molecule, marked(molecule, arrangement), others, systems, budget);
    return !own.decided || !exchanged.decided || exchanged.text !== own.text;
  });
}

function marked(molecule: Molecule, ligands: readonly number[]): Int32Array {
  const colours = molecule.symmetryClasses.map((c) => 8 * c);
  ligands.forEach((ligand, n) => {
    if (ligand !== LONE_PAIR) colours[ligand] += n + 1;
  });
  return colours;
}

/** Ligand orders that put equally coloured ligands in each other's place by an odd permutation. */
function oddArrangements({ kind, ligands }: StereoElement, colours: ArrayLike<number>): number[][] {
  const colour = (i: number) => (i === LONE_PAIR ? -1 : colours[i]);
  const orders =
    kind === 'tetrahedral'
      ? ODD_ORDERS
      : [
          [1, 0, 2, 3],
          [0, 1, 3, 2],
        ];
  return orders
    .map((order) => order.map((n) => ligands[n]))
    .filter((arrangement) => arrangement.every((ligand, n) => colour(ligand) === colour(ligands[n])));
}

const ODD_ORDERS = [
  [1, 0, 2, 3],
  [2, 1, 0, 3],
  [3, 1, 2, 0],
  [0, 2, 1, 3],
  [0, 3, 2, 1],
  [0, 1, 3, 2],
  [1, 2, 3, 0],
  [1, 3, 0, 2],
  [2, 0, 3, 1],
  [2, 3, 1, 0],
  [3, 0, 1, 2],
  [3, 2, 0, 1],
];

/**
 * Whether a cage of small rings fixes the configuration of a centre: the heads of norbornane and adamantane, the corners of cubane, the
 * shared bond of a propellane. Heads of large bicycles, which have in- and out-isomers, and fused rings are none.
 */
function isCageHead(molecule: Molecule, { kind, atoms: [centre] }: StereoElement): boolean {
  if (kind !== 'tetrahedral') return false;
  const small = (i: number) => molecule.rings.filter((ring) => ring.length <= LARGEST_CAGE_RING && ring.includes(i));
  const own = small(centre);
  const neighbours = [...neighboursOf(molecule, centre)].filter((j) => own.some((ring) => ring.includes(j)));
  if (neighbours.length < 3) return false;
  const bridged = own.some((ring, n) => own.slice(0, n).some((other) => ring.filter((i) => other.includes(i)).length > 2));
  const shared = new Map<number, number>();
  for (const ring of own) for (const i of ring) shared.set(i, (shared.get(i) ?? 0) + 1);
  shared.delete(centre);
  return bridged || [...shared.values()].some((count) => count > 2) || [centre, ...neighbours].every((i) => small(i).length > 2);
}
