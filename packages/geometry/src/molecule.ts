import { TordialError } from './errors.js';
import { relevantCycles } from './rings.js';
import { symmetryClasses } from './symmetry-classes.js';

/** Cartesian coordinates of n atoms, angstrom: x0 y0 z0 x1 y1 z1 ... */
export type Coordinates = Float64Array;

/** Bonds as columns of equal length; atom a is below atom b. */
export interface BondTable {
  readonly count: number;
  readonly a: Int32Array;
  readonly b: Int32Array;
  /** 1, 2 or 3 of the written (Kekule) structure. */
  readonly order: Uint8Array;
}

/** Neighbours in compressed rows: those of atom i stand at `start[i] .. start[i + 1] - 1`, ascending by atom. */
export interface Adjacency {
  readonly start: Int32Array;
  readonly atom: Int32Array;
  readonly bond: Int32Array;
}

/**
 * A stereocentre with four places. `neighbours` ascend by index; a lone pair is -1 and stands last.
 * `sign` is that of the triple product (n0 - c) . ((n1 - c) x (n2 - c)), 0 where the input leaves the centre open.
 * With a fourth neighbour the three first ones are seen from the side away from it; all four then have a fixed handedness.
 */
export interface TetrahedralCentre {
  readonly atom: number;
  readonly neighbours: readonly [number, number, number, number];
  readonly sign: -1 | 0 | 1;
}

/** A double bond a=b (or the ends of three, five ... cumulated ones) with one reference substituent at each end (the lowest index); `cis` is null where the input leaves it open. */
export interface DoubleBondStereo {
  readonly a: number;
  readonly b: number;
  readonly substituentA: number;
  readonly substituentB: number;
  readonly cis: boolean | null;
}

/** An allene-like axis between the atoms a and b; `sign` is that of the torsion substituentA-a-b-substituentB, 0 where open. */
export interface AxialStereo {
  readonly a: number;
  readonly b: number;
  readonly substituentA: number;
  readonly substituentB: number;
  readonly sign: -1 | 0 | 1;
}

export interface StereoTable {
  readonly tetrahedral: readonly TetrahedralCentre[];
  readonly doubleBonds: readonly DoubleBondStereo[];
  readonly axes: readonly AxialStereo[];
}

/** A molecule is immutable, has all its hydrogens as atoms, and keeps the input's atom order (added hydrogens come last). */
export interface Molecule {
  readonly atomCount: number;
  readonly atomicNumbers: Uint8Array;
  readonly formalCharges: Int8Array;
  /** Mass numbers, 0 for the natural mixture. */
  readonly isotopes: Uint16Array;
  readonly bonds: BondTable;
  readonly neighbours: Adjacency;
  /** The relevant cycles (union of all minimum cycle bases), atoms in ring order; independent of atom numbering. */
  readonly rings: readonly Int32Array[];
  /** Topologically equivalent atoms share a number. */
  readonly symmetryClasses: Int32Array;
  readonly stereo: StereoTable;
  readonly name: string;
}

/** What a molecule is made from: the atoms and bonds as the input writes them, hydrogens included. */
export interface MoleculeParts {
  readonly atomicNumbers: ArrayLike<number>;
  readonly formalCharges?: ArrayLike<number>;
  readonly isotopes?: ArrayLike<number>;
  /** Rows of atom, atom, order (1, 2, 3). */
  readonly bonds: readonly (readonly [number, number, number])[];
  readonly stereo?: StereoTable;
  readonly name?: string;
}

const NO_STEREO: StereoTable = { tetrahedral: [], doubleBonds: [], axes: [] };

/** Builds a molecule from its parts. Throws `molecule/bond` when a bond names an atom that is not there, itself, or a pair twice. */
export function createMolecule(parts: MoleculeParts): Molecule {
  const atomCount = parts.atomicNumbers.length;
  const { bonds, neighbours } = createGraph(atomCount, parts.bonds);
  const graph = {
    atomCount,
    atomicNumbers: Uint8Array.from(parts.atomicNumbers),
    formalCharges: parts.formalCharges ? Int8Array.from(parts.formalCharges) : new Int8Array(atomCount),
    isotopes: parts.isotopes ? Uint16Array.from(parts.isotopes) : new Uint16Array(atomCount),
    bonds,
    neighbours,
  };
  const rings = relevantCycles(graph);
  return {
    ...graph,
    rings,
    symmetryClasses: symmetryClasses({ ...graph, rings }),
    stereo: parts.stereo ?? NO_STEREO,
    name: parts.name ?? '',
  };
}

/** Bond table and neighbour rows of `atomCount` atoms from rows of atom, atom, order. Throws `molecule/bond` as `createMolecule` does. */
export function createGraph(atomCount: number, rows: MoleculeParts['bonds']): Pick<Molecule, 'bonds' | 'neighbours'> {
  const bonds = bondTable(rows, atomCount);
  return { bonds, neighbours: adjacency(atomCount, bonds) };
}

/** The part of a molecule that rings and symmetry are perceived from. */
export type MolecularGraph = Pick<Molecule, 'atomCount' | 'atomicNumbers' | 'formalCharges' | 'isotopes' | 'bonds' | 'neighbours'>;

function bondTable(rows: MoleculeParts['bonds'], atomCount: number): BondTable {
  const count = rows.length;
  const table = { count, a: new Int32Array(count), b: new Int32Array(count), order: new Uint8Array(count) };
  const seen = new Set<number>();
  rows.forEach(([p, q, order], n) => {
    const a = Math.min(p, q);
    const b = Math.max(p, q);
    if (a < 0 || b >= atomCount || a === b)
      throw new TordialError('molecule/bond', `bond ${n} joins atoms ${p} and ${q} of ${atomCount}`, { bond: n });
    if (seen.has(a * atomCount + b)) throw new TordialError('molecule/bond', `atoms ${a} and ${b} are bonded twice`, { bond: n });
    seen.add(a * atomCount + b);
    table.a[n] = a;
    table.b[n] = b;
    table.order[n] = order;
  });
  return table;
}

function adjacency(atomCount: number, bonds: BondTable): Adjacency {
  const rows: [number, number][][] = Array.from({ length: atomCount }, () => []);
  for (let n = 0; n < bonds.count; n++) {
    rows[bonds.a[n]].push([bonds.b[n], n]);
    rows[bonds.b[n]].push([bonds.a[n], n]);
  }
  const start = new Int32Array(atomCount + 1);
  const atom = new Int32Array(2 * bonds.count);
  const bond = new Int32Array(2 * bonds.count);
  let at = 0;
  rows.forEach((row, i) => {
    row.sort((p, q) => p[0] - q[0]);
    for (const [neighbour, index] of row) {
      atom[at] = neighbour;
      bond[at++] = index;
    }
    start[i + 1] = at;
  });
  return { start, atom, bond };
}

/** Index of the bond between two atoms, -1 where there is none. */
export function bondBetween({ neighbours }: Pick<Molecule, 'neighbours'>, i: number, j: number): number {
  for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) if (neighbours.atom[n] === j) return neighbours.bond[n];
  return -1;
}

/** Atoms bonded to atom i, ascending; a view, not a copy. */
export function neighboursOf({ neighbours }: Pick<Molecule, 'neighbours'>, i: number): Int32Array {
  return neighbours.atom.subarray(neighbours.start[i], neighbours.start[i + 1]);
}
