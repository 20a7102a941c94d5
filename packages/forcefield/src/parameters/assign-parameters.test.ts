import { createMolecule, type Molecule, moleculeFromSmiles } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { type BondedTermName, readSuite } from '../validation.fixture.js';
import { assignParameters, type Mmff94Parameters } from './assign-parameters.js';

/** Class and constants of one interaction, as the reference log prints them. */
type Constants = readonly number[];
type Listing = Map<string, Constants>;

/** All interactions by their atoms, read from either end; the log lists stretch-bend couplings from both. */
function listings(parameters: Mmff94Parameters): Record<BondedTermName, Listing> {
  const { bondStretching: b, angleBending: a, stretchBend: s, outOfPlane: o, torsion: t } = parameters;
  const listing = (count: number, row: (n: number) => (readonly [offsets: number[], constants: Constants])[]): Listing => {
    const found: Listing = new Map();
    for (let n = 0; n < count; n++) for (const [offsets, constants] of row(n)) found.set(offsets.map((x) => x / 3).join('-'), constants);
    return found;
  };
  const bothWays = (offsets: number[], constants: Constants) => [[offsets, constants] as const, [offsets.toReversed(), constants] as const];
  return {
    bondStretching: listing(b.i.length, (n) => bothWays([b.i[n], b.j[n]], [b.class[n], b.length[n], b.force[n]])),
    angleBending: listing(a.i.length, (n) => bothWays([a.i[n], a.j[n], a.k[n]], [a.class[n], a.angle[n], a.force[n]])),
    stretchBend: listing(s.i.length, (n) => [
      [
        [s.i[n], s.j[n], s.k[n]],
        [s.class[n], s.force_ij[n]],
      ],
      [
        [s.k[n], s.j[n], s.i[n]],
        [s.class[n], s.force_kj[n]],
      ],
    ]),
    outOfPlane: listing(o.i.length, (n) => [
      [[o.i[n], o.j[n], o.k[n], o.l[n]], [o.force[n]]],
      [[o.k[n], o.j[n], o.i[n], o.l[n]], [o.force[n]]],
    ]),
    torsion: listing(t.i.length, (n) => bothWays([t.i[n], t.j[n], t.k[n], t.l[n]], [t.class[n], t.v1[n], t.v2[n], t.v3[n]])),
  };
}

const TERMS: readonly BondedTermName[] = ['bondStretching', 'angleBending', 'stretchBend', 'outOfPlane', 'torsion'];
const isZero = (term: BondedTermName, constants: Constants) => constants.slice(term === 'outOfPlane' ? 0 : 1).every((value) => value === 0);

// T. A. Halgren, J. Comput. Chem. 17, 490 (1996) and 20, 720 (1999): the validation suites; constants are printed to three decimals
describe.each([
  { variant: 'MMFF94', interactions: 193_086 },
  { variant: 'MMFF94s', interactions: 73_971 },
] as const)('the $variant validation suite', ({ variant, interactions }) => {
  const suite = readSuite(variant);

  it('has the printed class and constants for every interaction, in both writings', () => {
    const wrong: string[] = [];
    let count = 0;
    for (const { name, molecule, hypervalent, interactions: listed } of suite)
      for (const writing of new Set([molecule, hypervalent])) {
        const found = listings(assignParameters(writing, variant));
        for (const term of TERMS) {
          const unlisted = new Set(found[term].keys());
          for (const { atoms, parameters } of listed[term]) {
            count++;
            const constants = found[term].get(atoms.join('-'));
            for (const key of [atoms, atoms.toReversed(), [atoms[2], atoms[1], atoms[0], atoms[3]]]) unlisted.delete(key.join('-'));
            // rows that add nothing are left out of the out-of-plane table
            if (constants ? parameters.some((value, n) => !(Math.abs(value - constants[n]) < 6e-4)) : !isZero(term, parameters))
              wrong.push(`${name} ${term} ${atoms.join('-')}: ${constants}, not ${parameters}`);
          }
          for (const key of unlisted) {
            const constants = found[term].get(key);
            if (constants && !isZero(term, constants)) wrong.push(`${name} ${term} ${key}: ${constants}, not listed`);
          }
        }
      }
    expect(wrong).toEqual([]);
    expect(count).toBe(interactions);
  });

  it('has one set of charges and constants in both writings', () => {
    const differing = suite.filter(({ molecule, hypervalent }) => molecule !== hypervalent);
    expect(differing.length).toBeGreaterThan(10);
    for (const { molecule, hypervalent } of differing) {
      const { symbolicTypes: symbols, ...dative } = assignParameters(molecule, variant);
      const { symbolicTypes: otherSymbols, ...other } = assignParameters(hypervalent, variant);
      expect(otherSymbols).toEqual(symbols);
      expect(other).toEqual(dative);
    }
  });

  it('does not depend on the order of the atoms', () => {
    for (const { molecule } of suite.filter((_, n) => n % 8 === 0)) {
      const order = shuffled(molecule.atomCount);
      const plain = listings(assignParameters(molecule, variant));
      const parameters = assignParameters(renumbered(molecule, order), variant);
      const moved = listings(parameters);
      for (const term of TERMS) {
        expect(moved[term].size).toBe(plain[term].size);
        for (const [key, constants] of plain[term])
          expect(
            moved[term].get(
              key
                .split('-')
                .map((atom) => order[Number(atom)])
                .join('-'),
            ),
          ).toEqual(constants);
      }
      const charges = assignParameters(molecule, variant).partialCharges;
      for (let i = 0; i < charges.length; i++) expect(parameters.partialCharges[order[i]]).toBeCloseTo(charges[i], 12);
    }
  });
});

/** A fixed permutation: atom i moves to place order[i]. */
function shuffled(count: number): number[] {
  const order = Array.from({ length: count }, (_, i) => i);
  let state = 12345;
  for (let i = count - 1; i > 0; i--) {
    state = (Math.imul(state, 1103515245) + 12345) >>> 0;
    const j = state % (i + 1);
    [order[i], order[j]] = [order[j], order[i]];
  }
  return order;
}

function renumbered(molecule: Molecule, order: readonly number[]): Molecule {
  const atomicNumbers: number[] = [];
  const formalCharges: number[] = [];
  order.forEach((place, i) => {
    atomicNumbers[place] = molecule.atomicNumbers[i];
    formalCharges[place] = molecule.formalCharges[i];
  });
  const { a, b, order: bondOrder, count } = molecule.bonds;
  const bonds = Array.from({ length: count }, (_, n) => [order[a[n]], order[b[n]], bondOrder[n]] as const);
  return createMolecule({ atomicNumbers, formalCharges, bonds });
}

describe('charges', () => {
  const charges = (smiles: string) => assignParameters(moleculeFromSmiles(smiles), 'MMFF94');

  // computed with Debian's python3-rdkit 2022.09.3; the first atoms, in SMILES order
  it.each([
    ['CC(=O)[O-]', [-0.106, 0.906, -0.9, -0.9]],
    ['C[N+](=O)[O-]', [0.2402, 0.8, -0.52, -0.52]],
    ['NC(N)=[NH2+]', [-0.9667, 1.2, -0.9667, -0.9667]],
    ['c1c[nH]c[nH+]1', [0.2, 0.2, -0.7, 0.65, -0.7]],
    ['CP(=O)([O-])[O-]', [0, 1.1, -1.0333, -1.0333, -1.0333]],
    ['[n-]1nnnc1', [-0.5875, -0.25, -0.25, -0.5875, 0.525]],
  ])('of %s', (smiles, expected) => {
    const { partialCharges } = charges(smiles);
    expected.forEach((charge, i) => {
      expect(partialCharges[i]).toBeCloseTo(charge, 3);
    });
  });

  it.each([
    ['O=[N+]([O-])[O-]', [-1 / 3, 0, -1 / 3, -1 / 3]],
    ['[O-]Cl(=O)(=O)=O', [-0.25, 0, -0.25, -0.25, -0.25]],
    ['NC=[NH2+]', [0.5, 0, 0.5]],
    ['NC(N)=[NH2+]', [1 / 3, 0, 1 / 3, 1 / 3]],
    ['C[N+]1=CC=CN1C', [0, 0.5, 0, 0, 0, 0.5, 0]],
    ['[n-]1cccc1', [-1, 0, 0, 0, 0]],
    ['[n-]1nnnc1', [-0.25, -0.25, -0.25, -0.25, 0]],
    ['CS(=O)[S-]', [0, 0, -0.5, -0.5]],
    ['CN=[N+]=[N-]', [0, 0, 0, 0]],
    ['C[N+]#N', [0, 1, 0]],
    ['C[P+](C)(C)C', [0, 1, 0, 0, 0]],
    ['[Ca+2].[Cl-]', [2, -1]],
  ])('formal ones of %s are shared by resonance', (smiles, expected) => {
    const { formalCharges } = charges(smiles);
    expected.forEach((charge, i) => {
      expect(formalCharges[i]).toBeCloseTo(charge, 12);
    });
  });

  it('add up to the charge of the molecule', () => {
    for (const { molecule } of readSuite('MMFF94')) {
      const { partialCharges, formalCharges } = assignParameters(molecule, 'MMFF94');
      const sum = partialCharges.reduce((total, charge) => total + charge, 0);
      expect(sum).toBeCloseTo(
        formalCharges.reduce((total, charge) => total + charge, 0),
        10,
      );
      expect(Math.abs(sum - Math.round(sum))).toBeLessThan(1e-9);
    }
  });
});
