/** Reads the packed validation data; what each file holds and where it comes from is said in fixtures/README.md. */
import { readFileSync } from 'node:fs';
import { brotliDecompressSync } from 'node:zlib';
import { type Coordinates, createMolecule, type Molecule } from '@tordial/geometry';

export type TermName = 'bondStretching' | 'angleBending' | 'stretchBend' | 'outOfPlane' | 'torsion' | 'vanDerWaals' | 'electrostatic';
export type BondedTermName = Exclude<TermName, 'vanDerWaals' | 'electrostatic'>;
export const TERM_NAMES: readonly TermName[] = [
  'bondStretching',
  'angleBending',
  'stretchBend',
  'outOfPlane',
  'torsion',
  'vanDerWaals',
  'electrostatic',
];

/** One bonded interaction as the reference log prints it; `parameters` as fixtures/README.md lists them. */
export interface ListedInteraction {
  readonly atoms: readonly number[];
  readonly parameters: readonly number[];
}

export interface ReferenceMolecule {
  readonly name: string;
  readonly molecule: Molecule;
  readonly x: Coordinates;
  readonly total: number;
  readonly energies: Readonly<Record<TermName, number>>;
}

export interface SuiteMolecule extends ReferenceMolecule {
  /** The same molecule with hypervalent bonds instead of separated charges; the same object where both writings agree. */
  readonly hypervalent: Molecule;
  /** Numerical atom types; null for an ion, which the log lists nowhere. */
  readonly types: readonly (number | null)[];
  readonly interactions: Readonly<Record<BondedTermName, readonly ListedInteraction[]>>;
}

export interface NciMolecule extends ReferenceMolecule {
  readonly smiles: string;
  readonly totalMmff94s: number;
}

interface PackedWriting {
  readonly charges: number[];
  /** atom, atom, order, atom, atom, order ... */
  readonly bonds: number[];
}

interface PackedMolecule extends PackedWriting {
  readonly name: string;
  readonly elements: number[];
  /** In units of 1e-4 angstrom. */
  readonly coordinates: number[];
  readonly energies: Partial<Record<TermName, number>> & { readonly total: number };
}

interface PackedSuiteMolecule extends PackedMolecule {
  readonly hypervalent?: PackedWriting;
  readonly types: (number | null)[];
  readonly interactions: Partial<Record<BondedTermName, number[]>>;
}

interface PackedNciMolecule extends PackedMolecule {
  readonly smiles: string;
  readonly totalMmff94s: number;
}

const ATOMS_OF_TERM: Record<BondedTermName, number> = { bondStretching: 2, angleBending: 3, stretchBend: 3, outOfPlane: 4, torsion: 4 };

function read<T>(file: string): T {
  return JSON.parse(brotliDecompressSync(readFileSync(new URL(`../fixtures/${file}`, import.meta.url))).toString('utf8')) as T;
}

function build(packed: PackedMolecule, writing: PackedWriting): Molecule {
  const bonds: [number, number, number][] = [];
  for (let n = 0; n < writing.bonds.length; n += 3) bonds.push([writing.bonds[n], writing.bonds[n + 1], writing.bonds[n + 2]]);
  return createMolecule({ atomicNumbers: packed.elements, formalCharges: writing.charges, bonds, name: packed.name });
}

function common(packed: PackedMolecule): ReferenceMolecule {
  const { total, ...listed } = packed.energies;
  const energies = Object.fromEntries(TERM_NAMES.map((term) => [term, listed[term] ?? 0])) as Record<TermName, number>;
  return {
    name: packed.name,
    molecule: build(packed, packed),
    x: Float64Array.from(packed.coordinates, (value) => value / 1e4),
    total,
    energies,
  };
}

function interactionsOf(rows: readonly number[], size: number, parameters: readonly number[][]): ListedInteraction[] {
  const listed: ListedInteraction[] = [];
  for (let n = 0; n < rows.length; n += size + 1) listed.push({ atoms: rows.slice(n, n + size), parameters: parameters[rows[n + size]] });
  return listed;
}

/** The validation suite of a variant: 761 molecules for MMFF94, 265 for MMFF94s. */
export function readSuite(variant: 'MMFF94' | 'MMFF94s'): SuiteMolecule[] {
  const { parameters, molecules } = read<{ parameters: Record<BondedTermName, number[][]>; molecules: PackedSuiteMolecule[] }>(
    `${variant.toLowerCase()}-suite.json.br`,
  );
  return molecules.map((packed) => {
    const base = common(packed);
    const terms = Object.keys(ATOMS_OF_TERM) as BondedTermName[];
    const interactions = Object.fromEntries(
      terms.map((term) => [term, interactionsOf(packed.interactions[term] ?? [], ATOMS_OF_TERM[term], parameters[term])]),
    ) as Record<BondedTermName, ListedInteraction[]>;
    return {
      ...base,
      hypervalent: packed.hypervalent ? build(packed, packed.hypervalent) : base.molecule,
      types: packed.types,
      interactions,
    };
  });
}

/** 300 molecules of the NCI open set. */
export function readNci(): NciMolecule[] {
  const { molecules } = read<{ molecules: PackedNciMolecule[] }>('nci.json.br');
  return molecules.map((packed) => ({ ...common(packed), smiles: packed.smiles, totalMmff94s: packed.totalMmff94s }));
}
