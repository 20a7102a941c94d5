/** Molecules from SMILES. */
import { type Assembled, assemble } from './assemble.js';
import { TordialError } from './errors.js';
import { checkLimit, type Limits, withDefaults } from './limits.js';
import {
  type AxialStereo,
  createMolecule,
  type DoubleBondStereo,
  type Molecule,
  type StereoTable,
  type TetrahedralCentre,
} from './molecule.js';
import { parseSmiles, type WrittenSmiles } from './smiles-syntax.js';
import { completeStereo } from './stereo.js';
import { OWN_HYDROGEN } from './written-structure.js';

/**
 * Reads a SMILES; text after the first white space becomes the molecule's name.
 *
 * Atoms that the line writes, hydrogens in brackets among them, keep its order; added hydrogens follow in ascending order of the atom they
 * sit on. Charges, tautomer and Kekule form are those written; lower-case rings get alternating bonds in a deterministic way.
 * Throws `smiles/syntax` and `smiles/stereo` with a 0-based `position`, `smiles/unsupported`, `molecule/kekule`, `molecule/valence`,
 * `molecule/radical`, `limit/...`.
 */
export function moleculeFromSmiles(smiles: string, limits?: Partial<Limits>): Molecule {
  const bounds = withDefaults(limits);
  checkLimit('recordLength', smiles.length, bounds);
  const [, line = '', name = ''] = /^\s*(\S*)\s*([\s\S]*?)\s*$/.exec(smiles) ?? [];
  if (/^\|.*\|/.test(name))
    throw new TordialError('smiles/unsupported', 'an extension between bars after the SMILES is not read; remove it or use a molfile', {
      position: smiles.indexOf('|'),
    });
  const written = parseSmiles(line, bounds);
  const assembled = assemble(written.atoms, written.bonds, bounds);
  const molecule = createMolecule({ ...assembled.parts, stereo: statedStereo(written, assembled), name });
  return { ...molecule, stereo: completeStereo(molecule) };
}

/** What the line says about configuration, whether it makes sense or not. */
function statedStereo(written: WrittenSmiles, assembled: Assembled): StereoTable {
  const ligands = ligandOrder(written, assembled);
  const tetrahedral: TetrahedralCentre[] = [];
  const axes: AxialStereo[] = [];
  written.atoms.forEach(({ chirality }, atom) => {
    if (chirality === '') return;
    const own = ligands[atom];
    const sign = chirality === '@' ? 1 : -1;
    if (own.length === 2) {
      const axis = statedAxis(written, ligands, atom, sign);
      if (axis) axes.push(axis);
    } else if (own.length === 3 || own.length === 4) {
      // a lone pair is seen, like a hydrogen, right after the atom one comes from
      const four = own.length === 4 ? own : comesFromNowhere(written, atom) ? [-1, ...own] : [own[0], -1, own[1], own[2]];
      const neighbours = ascending(four);
      tetrahedral.push({ atom, neighbours, sign: permutationSign(four, neighbours) === sign ? 1 : -1 });
    }
  });
  return { tetrahedral, axes, doubleBonds: statedDoubleBonds(written, assembled, ligands) };
}

const comesFromNowhere = ({ atoms }: WrittenSmiles, atom: number): boolean =>
  atoms[atom].ligands.every((other) => other < 0 || other > atom);

/** Ligands of each written atom in the order of the line, added hydrogens at their place. */
function ligandOrder({ atoms }: WrittenSmiles, { firstHydrogen, addedHydrogens }: Assembled): number[][] {
  return atoms.map(({ ligands, hydrogens }, i) => {
    const order: number[] = [];
    let next = firstHydrogen[i];
    for (const ligand of ligands) order.push(ligand === OWN_HYDROGEN ? next++ : ligand);
    if (hydrogens < 0 && addedHydrogens[i] > 0) {
      const added = Array.from({ length: addedHydrogens[i] }, (_, n) => firstHydrogen[i] + n);
      order.splice(ligands[0] >= 0 && ligands[0] < i ? 1 : 0, 0, ...added);
    }
    return order;
  });
}

/** `@` on the middle atom of cumulated bonds: the four end ligands in the order of the line, seen like those of a tetrahedron. */
function statedAxis(written: WrittenSmiles, ligands: readonly number[][], middle: number, sign: 1 | -1): AxialStereo | null {
  const order = (i: number, j: number) => written.bonds.find(({ a, b }) => (a === i && b === j) || (a === j && b === i))?.order ?? 1;
  const walk = (start: number) => {
    let [before, at] = [middle, start];
    for (let steps = 0; steps < written.atoms.length; steps++) {
      const next = ligands[at].filter((j) => j !== before && j < written.atoms.length && order(at, j) === 2);
      if (ligands[at].length !== 2 || next.length !== 1) break;
      [before, at] = [at, next[0]];
    }
    return { end: at, inner: before };
  };
  if (ligands[middle].some((j) => j >= written.atoms.length || order(middle, j) !== 2)) return null;
  const ends = ligands[middle].map(walk);
  const four = ends.flatMap(({ end, inner }) => ligands[end].filter((j) => j !== inner));
  if (four.length !== 4 || ends[0].end === ends[1].end) return null;
  let [a, b] = ends.map(({ end }) => end);
  let [p, q, r, s] = four;
  let sense: 1 | -1 = sign;
  if (p > q) sense = -sense as 1 | -1;
  if (r > s) sense = -sense as 1 | -1;
  [p, r] = [Math.min(p, q), Math.min(r, s)];
  if (a > b) [a, b, p, r] = [b, a, r, p];
  return { a, b, substituentA: p, substituentB: r, sign: sense };
}

/** Reads the slashes next to each double bond. Throws `smiles/stereo` where two at one end contradict each other. */
function statedDoubleBonds(written: WrittenSmiles, assembled: Assembled, ligands: readonly number[][]): DoubleBondStereo[] {
  const sides = written.atoms.map(() => new Map<number, number>());
  for (const { a, b, direction } of written.bonds) {
    if (direction === 0) continue;
    sides[a].set(b, direction);
    sides[b].set(a, -direction);
  }
  const stated: DoubleBondStereo[] = [];
  for (const [p, q, order] of assembled.parts.bonds) {
    if (order !== 2 || sides[p].size === 0 || sides[q].size === 0) continue;
    const [a, b] = [Math.min(p, q), Math.max(p, q)];
    const endA = reference(a, b);
    const endB = reference(b, a);
    if (endA && endB) stated.push({ a, b, substituentA: endA.ligand, substituentB: endB.ligand, cis: endA.side === endB.side });
  }
  return stated;

  /** The lowest ligand of an end and the side it lies on. */
  function reference(end: number, other: number): { ligand: number; side: number } | null {
    const own = ligands[end].filter((j) => j !== other).sort((i, j) => i - j);
    if (own.length === 0 || own.length > 2) return null;
    const [first, second] = own.map((j) => sides[end].get(j));
    if (first !== undefined && first === second) {
      const { position } = written.atoms[end];
      throw new TordialError(
        'smiles/stereo',
        `SMILES, character ${position + 1}: both substituents of atom ${end} are written on one side of its double bond`,
        { position, atom: end },
      );
    }
    if (first !== undefined) return { ligand: own[0], side: first };
    return second === undefined ? null : { ligand: own[0], side: -second };
  }
}

/** Ligands in ascending order, the lone pair (-1) last. */
function ascending(ligands: readonly number[]): [number, number, number, number] {
  const key = (i: number) => (i < 0 ? Number.POSITIVE_INFINITY : i);
  const [p, q, r, s] = [...ligands].sort((i, j) => key(i) - key(j));
  return [p, q, r, s];
}

/** +1 when the second order is an even permutation of the first, -1 when it is odd. */
function permutationSign(from: readonly number[], to: readonly number[]): 1 | -1 {
  const place = from.map((item) => to.indexOf(item));
  let inversions = 0;
  for (let i = 0; i < place.length; i++) for (let j = 0; j < i; j++) if (place[j] > place[i]) inversions++;
  return inversions % 2 === 0 ? 1 : -1;
}
