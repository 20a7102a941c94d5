/** Molecules from SMILES. */
import { type Assembled, assemble } from './assemble.js';
import { cumulatedChains } from './cumulenes.js';
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
  const molecule = createMolecule({ ...assembled.parts, name });
  const stated = { ...molecule, stereo: statedStereo(molecule, written, assembled) };
  return { ...stated, stereo: completeStereo(stated) };
}

/** What the line says about configuration, whether it makes sense or not. */
function statedStereo(molecule: Molecule, written: WrittenSmiles, assembled: Assembled): StereoTable {
  const ligands = ligandOrder(written, assembled);
  const chains = cumulatedChains(molecule);
  const tetrahedral: TetrahedralCentre[] = [];
  const axes: AxialStereo[] = [];
  written.atoms.forEach(({ chirality }, atom) => {
    if (chirality === '') return;
    const own = ligands[atom];
    const sign = chirality === '@' ? 1 : -1;
    const chain = chains.find((atoms) => atoms.length % 2 === 1 && atoms[(atoms.length - 1) / 2] === atom);
    if (chain) {
      const axis = statedAxis(chain, ligands, sign);
      if (axis) axes.push(axis);
    } else if (own.length === 3 || own.length === 4) {
      // a lone pair is seen, like a hydrogen, right after the atom one comes from
      const four = own.length === 4 ? own : comesFromNowhere(written, atom) ? [-1, ...own] : [own[0], -1, own[1], own[2]];
      const neighbours = ascending(four);
      tetrahedral.push({ atom, neighbours, sign: permutationSign(four, neighbours) === sign ? 1 : -1 });
    }
  });
  return { tetrahedral, axes, doubleBonds: statedDoubleBonds(chains, written, assembled, ligands) };
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
function statedAxis(chain: readonly number[], ligands: readonly number[][], sign: 1 | -1): AxialStereo | null {
  const middle = (chain.length - 1) / 2;
  const forward = ligands[chain[middle]][0] === chain[middle - 1];
  const path = forward ? chain : chain.slice().reverse();
  const [first, last] = [path[0], path[path.length - 1]];
  const atFirst = ligands[first].filter((j) => j !== path[1]);
  const atLast = ligands[last].filter((j) => j !== path[path.length - 2]);
  if (atFirst.length !== 2 || atLast.length !== 2) return null;
  const exchanged = atFirst[0] > atFirst[1] !== atLast[0] > atLast[1];
  const [low, high] = [Math.min(...atFirst), Math.min(...atLast)];
  const [substituentA, substituentB] = first < last ? [low, high] : [high, low];
  return { a: Math.min(first, last), b: Math.max(first, last), substituentA, substituentB, sign: exchanged ? (-sign as 1 | -1) : sign };
}

/** Reads the slashes next to each double bond and each odd chain of them. Throws `smiles/stereo` where two at one end contradict each other. */
function statedDoubleBonds(
  chains: readonly number[][],
  written: WrittenSmiles,
  assembled: Assembled,
  ligands: readonly number[][],
): DoubleBondStereo[] {
  const sides = written.atoms.map(() => new Map<number, number>());
  for (const { a, b, direction } of written.bonds) {
    if (direction === 0) continue;
    sides[a].set(b, direction);
    sides[b].set(a, -direction);
  }
  const stated: DoubleBondStereo[] = [];
  const units = [
    ...assembled.parts.bonds.filter(([, , order]) => order === 2).map(([p, q]) => (p < q ? [p, q] : [q, p])),
    ...chains.filter((chain) => chain.length % 2 === 0),
  ];
  for (const unit of units) {
    const [a, b] = [unit[0], unit[unit.length - 1]];
    if (sides[a].size === 0 || sides[b].size === 0) continue;
    const endA = reference(a, unit[1]);
    const endB = reference(b, unit[unit.length - 2]);
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
