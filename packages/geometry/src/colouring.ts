/**
 * Refined colourings of a structure: atoms are split by the colours of their neighbours and by the configurations that those colours make
 * definite, until nothing splits. Equal ligands are told apart by giving one of them a colour of its own.
 *
 * Source: individualisation and refinement, B. D. McKay, Congressus Numerantium 30, 45 (1981).
 */
import type { Molecule } from './molecule.js';
import { type StereoElement, senseInColours, systemOf, tied } from './stereo-elements.js';

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
 * Splits equal ligands until every configuration is definite. Within a ring system (`systems`, one number an atom, -1 outside rings) each
 * choice is tried and the one with the least text kept, so that the result does not depend on the order of atoms; separate systems, whose
 * configurations do not depend on one another, are settled side by side.
 */
export function makeDefinite(
  structure: Structure,
  start: ArrayLike<number>,
  elements: readonly StereoElement[],
  systems: ArrayLike<number>,
  budget = COLOURING_BUDGET,
): Definite {
  let { colours } = refine(structure, start, elements);
  let text = describe(structure, start, colours, elements);
  let decided = true;
  const isIndefinite = (element: StereoElement) =>
    element.sign !== 0 && senseInColours(element, colours) === 0 && tied(element, colours).length > 0;
  for (;;) {
    const indefinite = elements.filter(isIndefinite);
    if (indefinite.length === 0) return { text, colours, decided };
    // elements outside rings become definite when the rings that their ligands hold do
    const inRings = indefinite.filter((element) => systemOf(element, systems) >= 0);
    const eligible = inRings.length > 0 ? inRings : indefinite;
    const lowest = Math.min(...eligible.map(({ atoms }) => colours[atoms[0]]));
    const groups = new Map<number, StereoElement[]>();
    for (const element of eligible) {
      if (colours[element.atoms[0]] !== lowest) continue;
      const system = systemOf(element, systems);
      const key = system >= 0 ? system : -1 - element.atoms[0];
      groups.set(key, [...(groups.get(key) ?? []), element]);
    }
    const chosen: number[][] = [];
    for (const [key, leaders] of groups) {
      const own = elements.filter((element) => !isIndefinite(element) || leaders.includes(element) || systemOf(element, systems) === key);
      const best = settle(structure, colours, leaders, own, { left: budget });
      decided &&= best.decided;
      chosen.push(best.ligands);
    }
    const steps = Math.max(...chosen.map((ligands) => ligands.length)) + 1;
    const split = colours.map((colour) => steps * colour + steps - 1);
    for (const ligands of chosen)
      ligands.forEach((ligand, n) => {
        split[ligand] = steps * colours[ligand] + n;
      });
    ({ colours } = refine(structure, split, elements));
    text += `\n${describe(structure, split, colours, elements)}`;
  }
}

interface Settled {
  readonly text: string;
  /** Ligands set apart, in order. */
  readonly ligands: number[];
  readonly decided: boolean;
}

/** Sets ligands of the leaders, and then of what stays indefinite among `elements`, apart in the way that has the least text. */
function settle(
  structure: Structure,
  colours: Int32Array,
  leaders: readonly StereoElement[],
  elements: readonly StereoElement[],
  budget: { left: number },
): Settled {
  let best: Settled | null = null;
  let decided = true;
  for (const leader of leaders)
    for (const ligand of tied(leader, colours)) {
      if (best && budget.left <= 0) {
        decided = false;
        continue;
      }
      budget.left--;
      const split = colours.map((colour) => 2 * colour + 1);
      split[ligand]--;
      const refined = refine(structure, split, elements).colours;
      let text = describe(structure, split, refined, elements);
      const ligands = [ligand];
      const open = elements.filter(
        (element) => element.sign !== 0 && senseInColours(element, refined) === 0 && tied(element, refined).length > 0,
      );
      if (open.length > 0) {
        const lowest = Math.min(...open.map(({ atoms }) => refined[atoms[0]]));
        const next = settle(
          structure,
          refined,
          open.filter(({ atoms }) => refined[atoms[0]] === lowest),
          elements,
          budget,
        );
        text += `\n${next.text}`;
        ligands.push(...next.ligands);
        decided &&= next.decided;
      }
      if (!best || text < best.text) best = { text, ligands, decided: true };
    }
  return { text: best?.text ?? '', ligands: best?.ligands ?? [], decided };
}
