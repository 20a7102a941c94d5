/** One SMILES for one structure, whatever the order of its atoms and the way its alternating bonds are written. */
import { makeDefinite, makeDiscrete } from './colouring.js';
import { cumulatedChains } from './cumulenes.js';
import { delocalisedBonds } from './delocalised-bonds.js';
import { elementSymbol } from './elements.js';
import { fragmentsOf } from './fragments.js';
import { type Molecule, neighboursOf } from './molecule.js';
import { ringSystems } from './rings.js';
import { elementsOf, LONE_PAIR, type StereoElement } from './stereo-elements.js';
import { missingHydrogens, normalValences } from './valence.js';

/** Elements that SMILES writes without brackets, and those it can write in lower case. */
const ORGANIC = new Set([5, 6, 7, 8, 9, 15, 16, 17, 35, 53]);
const LOWER_CASE = new Set([5, 6, 7, 8, 15, 16, 33, 34, 52]);

/**
 * The isomeric SMILES of a molecule. It does not depend on atom order or Kekule form and holds isotopes, charges and every stereo element
 * that is specified; hydrogens are written only where they are isotopes or have no heavy neighbour. Atoms whose bonds alternate are in lower
 * case, localised rings (furan) as they are.
 */
export function canonicalSmiles(molecule: Molecule): string {
  const elements = elementsOf(molecule).filter((element) => element.sign !== 0);
  const delocalised = lowerCaseBonds(molecule, elements);
  const rank = canonicalRanks(molecule, elements, delocalised);
  const open = openEnds(molecule);
  const hidden = hiddenHydrogens(molecule, elements, open);
  const { count, ofAtom } = fragmentsOf(molecule);
  const parts: string[] = [];
  for (let fragment = 0; fragment < count; fragment++) {
    const atoms: number[] = [];
    for (let i = 0; i < molecule.atomCount; i++) if (ofAtom[i] === fragment && !hidden[i]) atoms.push(i);
    parts.push(writeFragment(molecule, atoms, { rank, hidden, delocalised, elements, open }));
  }
  return parts.sort().join('.');
}

/** A rank for each atom, equivalent atoms in arbitrary order. Charges and localised multiple bonds decide where connectivity does not. */
function canonicalRanks(molecule: Molecule, elements: readonly StereoElement[], delocalised: Uint8Array): Int32Array {
  const { atomCount, symmetryClasses, formalCharges, bonds } = molecule;
  const localised = new Int32Array(atomCount);
  for (let n = 0; n < bonds.count; n++)
    if (!delocalised[n]) {
      localised[bonds.a[n]] += bonds.order[n] - 1;
      localised[bonds.b[n]] += bonds.order[n] - 1;
    }
  const start = Int32Array.from(symmetryClasses, (own, i) => (own * 64 + formalCharges[i] + 16) * 8 + Math.min(7, localised[i]));
  const bondKinds = bonds.order.map((order, n) => (delocalised[n] ? 0 : order));
  const structure = { atomCount, neighbours: molecule.neighbours, bondKinds };
  return makeDiscrete(structure, makeDefinite(structure, start, elements, ringSystems(molecule)).colours, elements);
}

/** Ends of double bonds whose configuration is open: a slash beside them would state one. */
function openEnds({ stereo }: Molecule): ReadonlySet<number> {
  return new Set(stereo.doubleBonds.flatMap(({ a, b, cis }) => (cis === null ? [a, b] : [])));
}

/** Hydrogens that an atom's symbol can imply; those that must carry a slash in place of a bond to an open double bond are written. */
function hiddenHydrogens(molecule: Molecule, elements: readonly StereoElement[], open: ReadonlySet<number>): Uint8Array {
  const { atomCount, atomicNumbers, isotopes, formalCharges } = molecule;
  const carriers = new Set<number>();
  for (const { kind, ligands } of elements)
    if (kind === 'doubleBond')
      for (const [p, q] of [ligands.slice(0, 2), ligands.slice(2)]) {
        if (open.has(p)) carriers.add(q);
        if (open.has(q)) carriers.add(p);
      }
  return Uint8Array.from({ length: atomCount }, (_, i) => {
    const around = neighboursOf(molecule, i);
    const plain = atomicNumbers[i] === 1 && isotopes[i] === 0 && formalCharges[i] === 0 && !carriers.has(i);
    return plain && around.length === 1 && atomicNumbers[around[0]] !== 1 ? 1 : 0;
  });
}

/** Bonds to leave to lower case; a specified double bond keeps its whole system as written. */
function lowerCaseBonds(molecule: Molecule, elements: readonly StereoElement[]): Uint8Array {
  const { neighbours, atomicNumbers } = molecule;
  const marks = delocalisedBonds(molecule, (atom) => LOWER_CASE.has(atomicNumbers[atom]));
  const specified = elements.filter(({ kind }) => kind === 'doubleBond').flatMap(({ atoms }) => atoms);
  for (const i of specified)
    for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++)
      if (marks[neighbours.bond[n]]) {
        marks[neighbours.bond[n]] = 0;
        specified.push(neighbours.atom[n]);
      }
  return marks;
}

/** What all fragments are written by. */
interface Writing {
  readonly rank: Int32Array;
  readonly hidden: Uint8Array;
  readonly delocalised: Uint8Array;
  readonly elements: readonly StereoElement[];
  readonly open: ReadonlySet<number>;
}

interface Tree {
  readonly order: readonly number[];
  readonly parent: Int32Array;
  readonly children: readonly number[][];
  /** Ring-closing partners of each atom in the order in which their numbers are written. */
  readonly closures: readonly number[][];
}

/** Depth-first tree over the written atoms, neighbours by rank, the largest branch last. */
function spanningTree(molecule: Molecule, root: number, rank: Int32Array, hidden: Uint8Array): Tree {
  const { atomCount } = molecule;
  const parent = new Int32Array(atomCount).fill(-2);
  const children: number[][] = Array.from({ length: atomCount }, () => []);
  const closures: number[][] = Array.from({ length: atomCount }, () => []);
  const place = new Int32Array(atomCount).fill(-1);
  const written = (i: number) => [...neighboursOf(molecule, i)].filter((j) => !hidden[j]).sort((p, q) => rank[p] - rank[q]);

  // an explicit stack, for chains may be longer than the call stack
  const visited: number[] = [];
  const stack: { atom: number; next: number[] }[] = [{ atom: root, next: written(root) }];
  parent[root] = -1;
  visited.push(root);
  while (stack.length > 0) {
    const top = stack[stack.length - 1];
    const j = top.next.shift();
    if (j === undefined) stack.pop();
    else if (parent[j] === -2) {
      parent[j] = top.atom;
      children[top.atom].push(j);
      visited.push(j);
      stack.push({ atom: j, next: written(j) });
    }
  }
  const size = new Int32Array(atomCount).fill(1);
  for (const i of visited.slice().reverse()) {
    children[i].sort((p, q) => size[p] - size[q] || rank[p] - rank[q]);
    if (parent[i] >= 0) size[parent[i]] += size[i];
  }

  const order: number[] = [];
  const pending = [root];
  for (let i = pending.pop(); i !== undefined; i = pending.pop()) {
    place[i] = order.length;
    order.push(i);
    pending.push(...children[i].slice().reverse());
  }
  for (const i of order) for (const j of written(i)) if (parent[j] !== i && parent[i] !== j) closures[i].push(j);
  for (const i of order) closures[i].sort((p, q) => place[p] - place[q]);
  return { order, parent, children, closures };
}

function writeFragment(molecule: Molecule, atoms: readonly number[], { rank, hidden, delocalised, elements, open }: Writing): string {
  const heavyDegree = (i: number) => neighboursOf(molecule, i).filter((j) => !hidden[j]).length;
  const [root] = atoms.slice().sort((p, q) => heavyDegree(p) - heavyDegree(q) || rank[p] - rank[q]);
  const tree = spanningTree(molecule, root, rank, hidden);
  const { parent, children, closures } = tree;
  const lower = new Uint8Array(molecule.atomCount);
  const bondOf = new Map<string, number>();
  for (let n = 0; n < molecule.bonds.count; n++) {
    const [a, b] = [molecule.bonds.a[n], molecule.bonds.b[n]];
    bondOf.set(`${a} ${b}`, n).set(`${b} ${a}`, n);
    if (delocalised[n]) lower[a] = lower[b] = 1;
  }
  const ligands = (i: number) => ligandsAsWritten(molecule, i, tree, hidden);
  const slashes = directions(molecule, tree, elements, hidden, open);
  const chirality = new Map<number, string>();
  for (const element of elements) {
    const [atom, mark] = chiralityMark(molecule, element, ligands, tree);
    if (mark) chirality.set(atom, mark);
  }

  const openNumbers = new Map<string, number>();
  const freeNumbers: number[] = [];
  let highest = 0;
  let text = '';
  // branches are written with an explicit stack: an atom, or the text that closes a branch
  const pending: (number | string)[] = [root];
  for (let item = pending.pop(); item !== undefined; item = pending.pop()) {
    if (typeof item === 'string') {
      text += item;
      continue;
    }
    if (parent[item] >= 0) text += bondSymbol(parent[item], item);
    text += atomText(item);
    // numbers that end here are free again only after all of this atom's are written
    const ended: number[] = [];
    for (const j of closures[item]) {
      const opened = openNumbers.get(`${j} ${item}`);
      if (opened !== undefined) {
        text += ringNumber(opened);
        ended.push(opened);
      } else {
        const number = freeNumbers.sort((p, q) => p - q).shift() ?? ++highest;
        openNumbers.set(`${item} ${j}`, number);
        text += bondSymbol(item, j) + ringNumber(number);
      }
    }
    freeNumbers.push(...ended);
    const branches = children[item];
    for (let n = branches.length - 1; n >= 0; n--) {
      if (n < branches.length - 1) pending.push(')', branches[n], '(');
      else pending.push(branches[n]);
    }
  }
  return text;

  function bondSymbol(from: number, to: number): string {
    const n = bondOf.get(`${from} ${to}`) ?? -1;
    if (delocalised[n]) return '';
    const { order } = molecule.bonds;
    if (order[n] === 2) return '=';
    if (order[n] === 3) return '#';
    const slash = slashes.get(`${from} ${to}`);
    if (slash !== undefined) return slash > 0 ? '/' : '\\';
    return lower[from] && lower[to] ? '-' : '';
  }

  function atomText(i: number): string {
    const z = molecule.atomicNumbers[i];
    const charge = molecule.formalCharges[i];
    const isotope = molecule.isotopes[i];
    const mark = chirality.get(i) ?? '';
    const hydrogens = neighboursOf(molecule, i).filter((j) => hidden[j]).length;
    const symbol = lower[i] ? elementSymbol(z).toLowerCase() : elementSymbol(z);
    let valence = 0;
    for (let n = molecule.neighbours.start[i]; n < molecule.neighbours.start[i + 1]; n++)
      if (!hidden[molecule.neighbours.atom[n]]) valence += molecule.bonds.order[molecule.neighbours.bond[n]];
    // a reader gives a lower-case atom its double bond where its other bonds are no normal valence
    const needsDouble = !lower[i] || (z !== 5 && !(normalValences(z, 0) ?? []).includes(valence - 1));
    const bare =
      charge === 0 && isotope === 0 && mark === '' && ORGANIC.has(z) && needsDouble && missingHydrogens(z, 0, valence) === hydrogens;
    if (bare) return symbol;
    const counted = hydrogens === 0 ? '' : hydrogens === 1 ? 'H' : `H${hydrogens}`;
    const signed = charge === 0 ? '' : charge === 1 ? '+' : charge === -1 ? '-' : charge > 0 ? `+${charge}` : String(charge);
    return `[${isotope || ''}${symbol}${mark}${counted}${signed}]`;
  }
}

const ringNumber = (number: number): string => (number < 10 ? String(number) : number < 100 ? `%${number}` : `%(${number})`);

/** Ligands of an atom in the order in which the line names them; hidden hydrogens and the lone pair right after the atom one comes from. */
function ligandsAsWritten(molecule: Molecule, i: number, { parent, children, closures }: Tree, hidden: Uint8Array): number[] {
  const from = parent[i] >= 0 ? [parent[i]] : [];
  const own = [...neighboursOf(molecule, i)].filter((j) => hidden[j]);
  return [...from, ...own, ...closures[i], ...children[i]];
}

/** The atom that carries an element's mark, and the mark. */
function chiralityMark(
  molecule: Molecule,
  element: StereoElement,
  ligands: (i: number) => number[],
  { parent }: Tree,
): [number, '' | '@' | '@@'] {
  const [a, b] = element.atoms;
  if (element.kind === 'doubleBond') return [a, ''];
  if (element.kind === 'tetrahedral') {
    const own = ligands(a);
    if (parent[a] === -2) return [a, ''];
    const four = own.length === 4 ? own : parent[a] >= 0 ? [own[0], LONE_PAIR, ...own.slice(1)] : [LONE_PAIR, ...own];
    return [a, element.sign * permutationSign(element.ligands, four) > 0 ? '@' : '@@'];
  }
  const chain = cumulatedChains(molecule).find((atoms) => atoms[0] === a && atoms[atoms.length - 1] === b) ?? [a, b];
  const middle = chain[(chain.length - 1) / 2];
  if (parent[middle] === -2) return [middle, ''];
  // the ends in the order in which the middle atom names its two neighbours
  const inner = ligands(middle);
  const ends = inner[0] === chain[(chain.length - 3) / 2] ? [chain, chain.slice().reverse()] : [chain.slice().reverse(), chain];
  const four = ends.flatMap((path) => ligands(path[0]).filter((j) => j !== path[1]));
  return [middle, element.sign * permutationSign(element.ligands, four) > 0 ? '@' : '@@'];
}

/** +1 when two orders of the same ligands differ by an even permutation. An axis' ligands may also exchange their ends, which is even. */
function permutationSign(from: readonly number[], to: readonly number[]): 1 | -1 {
  let sign: 1 | -1 = 1;
  const places = to.map((item) => from.indexOf(item));
  for (let i = 0; i < places.length; i++) for (let j = 0; j < i; j++) if (places[j] > places[i]) sign = sign === 1 ? -1 : 1;
  return sign;
}

/**
 * Slashes for the specified double bonds of the tree: keys `from to` in writing direction, +1 for '/'. All single bonds at the ends that are
 * written get one; where two double bonds share a bond, both are served by propagation from the first.
 */
function directions(
  molecule: Molecule,
  { order, parent, closures }: Tree,
  elements: readonly StereoElement[],
  hidden: Uint8Array,
  open: ReadonlySet<number>,
): Map<string, number> {
  const place = new Int32Array(molecule.atomCount).fill(-1);
  order.forEach((atom, n) => {
    place[atom] = n;
  });
  const forward = (i: number, j: number) =>
    parent[j] === i ? true : parent[i] === j ? false : place[i] < place[j] && closures[i].includes(j);
  const bonds = elements.filter((element) => element.kind === 'doubleBond' && place[element.atoms[0]] >= 0);
  bonds.sort((p, q) => Math.min(...p.atoms.map((i) => place[i])) - Math.min(...q.atoms.map((i) => place[i])));

  /** Ligands at both ends with the side that the first of each end has: those of end a as they are, those of end b by the sign. */
  const sidesOf = (element: StereoElement) =>
    element.ligands.flatMap((ligand, n) => {
      const partner = element.ligands[n ^ 1];
      const avoided = open.has(ligand) && partner !== LONE_PAIR && !open.has(partner);
      if (ligand === LONE_PAIR || hidden[ligand] || avoided) return [];
      const side = (n % 2 === 0 ? 1 : -1) * (n < 2 ? 1 : element.sign);
      return [{ end: element.atoms[n < 2 ? 0 : 1], ligand, side }];
    });
  const slashes = new Map<string, number>();
  const sideOf = (end: number, ligand: number) => {
    const outward = slashes.get(`${end} ${ligand}`);
    if (outward !== undefined) return outward;
    const inward = slashes.get(`${ligand} ${end}`);
    return inward === undefined ? undefined : -inward;
  };
  const done = new Set<StereoElement>();
  const queue: StereoElement[] = [];
  for (const first of bonds) {
    if (!done.has(first)) queue.push(first);
    for (let element = queue.shift(); element; element = queue.shift()) {
      if (done.has(element)) continue;
      done.add(element);
      const sides = sidesOf(element);
      const known = sides
        .map(({ end, ligand, side }) => ({ side, written: sideOf(end, ligand) }))
        .find(({ written }) => written !== undefined);
      // the first bond of a line that carries a slash goes up
      const lead = sides.slice().sort((p, q) => Math.min(place[p.end], place[p.ligand]) - Math.min(place[q.end], place[q.ligand]))[0];
      const flip = known ? (known.written ?? 1) * known.side : lead.side * (forward(lead.end, lead.ligand) ? 1 : -1);
      for (const { end, ligand, side } of sides) {
        const value = flip * side;
        if (forward(end, ligand)) slashes.set(`${end} ${ligand}`, value);
        else slashes.set(`${ligand} ${end}`, -value);
      }
      for (const other of bonds)
        if (!done.has(other) && sides.some(({ ligand, end }) => other.atoms.includes(ligand) && other.ligands.includes(end)))
          queue.push(other);
    }
  }
  return slashes;
}
