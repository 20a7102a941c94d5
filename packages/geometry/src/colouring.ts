/**
 * Refined colourings of a structure: atoms are split by the colours of their neighbours and by the configurations that those colours make
 * definite, until nothing splits. Equal ligands are told apart by giving one of them a colour of its own.
 *
 * Source: individualisation and refinement, B. D. McKay, Congressus Numerantium 30, 45 (1981).
 */
import type { Molecule } from './molecule.js';
import { type StereoElement, senseInColours, tied } from './stereo-elements.js';

/** Colourings that one question may cost before it is left undecided. */
const COLOURING_BUDGET = 200;

export interface Colouring {
  /** Colour of each atom; classes of a coarser colouring keep their order. A class has the number of atoms before it as its colour. */
  readonly colours: Int32Array;
  readonly classCount: number;
}

/** `bondKinds`, one number a bond, takes part in descriptions, not in the refinement. */
export type Structure = Pick<Molecule, 'atomCount' | 'neighbours'> & { readonly bondKinds?: ArrayLike<number> };

/** Refines the colours `start` (any integers, 0 or more), one per atom, with the given stereo elements. */
export function refine({ atomCount, neighbours }: Structure, start: ArrayLike<number>, elements: readonly StereoElement[] = []): Colouring {
  const order = Array.from({ length: atomCount }, (_, i) => i);
  const colours = new Int32Array(atomCount);
  const finer = new Int32Array(atomCount);
  const marks = new Uint8Array(atomCount);
  const around = new Int32Array(neighbours.atom.length);
  let classCount = split((p, q) => start[p] - start[q]);
  for (;;) {
    marks.fill(0);
    for (const element of elements) {
      const sense = senseInColours(element, colours);
      if (sense !== 0) for (const atom of element.atoms) marks[atom] = 3 * marks[atom] + (sense > 0 ? 1 : 2);
    }
    for (let i = 0; i < atomCount; i++) {
      for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) around[n] = colours[neighbours.atom[n]];
      around.subarray(neighbours.start[i], neighbours.start[i + 1]).sort();
    }
    const finerCount = split(byNeighbourhood);
    if (finerCount === classCount) return { colours, classCount };
    classCount = finerCount;
  }

  /** Sorts the atoms and numbers the classes of equal ones. */
  function split(compare: (p: number, q: number) => number): number {
    order.sort(compare);
    let count = 0;
    order.forEach((atom, n) => {
      const isNew = n === 0 || compare(order[n - 1], atom) !== 0;
      if (isNew) count++;
      finer[atom] = isNew ? n : finer[order[n - 1]];
    });
    colours.set(finer);
    return count;
  }

  function byNeighbourhood(p: number, q: number): number {
    if (colours[p] !== colours[q]) return colours[p] - colours[q];
    if (marks[p] !== marks[q]) return marks[p] - marks[q];
    const degree = neighbours.start[p + 1] - neighbours.start[p];
    const difference = degree - (neighbours.start[q + 1] - neighbours.start[q]);
    if (difference !== 0) return difference;
    for (let n = 0; n < degree; n++) {
      const gap = around[neighbours.start[p] + n] - around[neighbours.start[q] + n];
      if (gap !== 0) return gap;
    }
    return 0;
  }
}

/** What distinguishes a refined structure from others: each class with its first colour, neighbours, configuration and size. */
function describe(
  { atomCount, neighbours, bondKinds }: Structure,
  start: ArrayLike<number>,
  colours: Int32Array,
  elements: readonly StereoElement[],
): string {
  const first = new Int32Array(atomCount).fill(-1);
  const size = new Int32Array(atomCount);
  for (let i = 0; i < atomCount; i++) {
    if (first[colours[i]] < 0) first[colours[i]] = i;
    size[colours[i]]++;
  }
  const senses = new Map<number, number>();
  for (const element of elements) for (const atom of element.atoms) senses.set(atom, senseInColours(element, colours));
  let text = '';
  for (let colour = 0; colour < atomCount; colour += Math.max(1, size[colour])) {
    const i = first[colour];
    const around: number[] = [];
    for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++)
      around.push(16 * colours[neighbours.atom[n]] + (bondKinds?.[neighbours.bond[n]] ?? 0));
    text += `${start[i]}:${around.sort((p, q) => p - q).join()}:${senses.get(i) ?? 0}x${size[colour]} `;
  }
  return text;
}

/**
 * Splits a colouring until every atom has a colour of its own. Of equal atoms the one is set apart whose refined structure has the least
 * description; atoms without a difference there are taken for equivalent and the first is chosen.
 */
export function makeDiscrete(structure: Structure, start: Int32Array, elements: readonly StereoElement[]): Int32Array {
  const { atomCount, neighbours } = structure;
  const isLeaf = (i: number) => neighbours.start[i + 1] - neighbours.start[i] < 2;
  let colours = start;
  for (;;) {
    const members: number[][] = Array.from({ length: atomCount }, () => []);
    colours.forEach((colour, i) => {
      members[colour].push(i);
    });
    const shared = members.filter((own) => own.length > 1);
    if (shared.length === 0) return colours;
    // leaves follow the atoms they sit on, and of several on one atom none is different
    const inner = shared.find((own) => !own.every(isLeaf));
    const choices = inner ?? shared[0].slice(0, 1);
    let least: { text: string; colours: Int32Array } | null = null;
    for (const member of choices) {
      const split = colours.map((colour) => 2 * colour + 1);
      split[member]--;
      const refined = refine(structure, split, elements).colours;
      const text = inner ? describe(structure, split, refined, elements) : '';
      if (!least || text < least.text) least = { text, colours: refined };
    }
    if (!least) return colours;
    colours = least.colours;
  }
}

export interface Definite {
  /** Equal for two coloured structures that a symmetry carries into one another. */
  readonly text: string;
  readonly colours: Int32Array;
  /** False when the budget ran out before every choice was tried. */
  readonly decided: boolean;
}

/**
 * Splits equal ligands until every configuration is definite. Each choice is tried and the one with the least text kept, so that the result
 * does not depend on the order of atoms.
 */
export function makeDefinite(
  molecule: Structure,
  start: ArrayLike<number>,
  elements: readonly StereoElement[],
  budget = { left: COLOURING_BUDGET },
): Definite {
  budget.left--;
  const { colours } = refine(molecule, start, elements);
  const text = describe(molecule, start, colours, elements);
  const indefinite = elements.filter(
    (element) => element.sign !== 0 && senseInColours(element, colours) === 0 && tied(element, colours).length > 0,
  );
  if (indefinite.length === 0) return { text, colours, decided: true };
  const lowest = Math.min(...indefinite.map((element) => colours[element.atoms[0]]));
  let best: Definite | null = null;
  let decided = true;
  for (const element of indefinite) {
    if (colours[element.atoms[0]] !== lowest) continue;
    for (const ligand of tied(element, colours)) {
      if (best && budget.left <= 0) {
        decided = false;
        continue;
      }
      const split = colours.map((colour) => 2 * colour + 1);
      split[ligand]--;
      const tried = makeDefinite(molecule, split, elements, budget);
      decided &&= tried.decided;
      if (!best || tried.text < best.text) best = tried;
    }
  }
  return { text: `${text}\n${best?.text ?? ''}`, colours: best?.colours ?? colours, decided };
}
