import { describe, expect, it } from 'vitest';
import { cipPriority } from './cip-priority.js';
import { createMolecule } from './molecule.js';
import { moleculeFromSmiles } from './smiles.js';

/** Groups by rising priority: IUPAC 1974 Recommendations, Section E, Appendix 2 (from memory), as SMILES read from the point of attachment. */
const BY_RISING_PRIORITY = [
  ['methyl', 'C'],
  ['ethyl', 'CC'],
  ['propyl', 'CCC'],
  ['butyl', 'CCCC'],
  ['pentyl', 'CCCCC'],
  ['hexyl', 'CCCCCC'],
  ['isopentyl', 'CCC(C)C'],
  ['isobutyl', 'CC(C)C'],
  ['allyl', 'CC=C'],
  ['neopentyl', 'CC(C)(C)C'],
  ['2-propynyl', 'CC#C'],
  ['benzyl', 'Cc9ccccc9'],
  ['isopropyl', 'C(C)C'],
  ['vinyl', 'C=C'],
  ['sec-butyl', 'C(C)CC'],
  ['cyclohexyl', 'C9CCCCC9'],
  ['1-propenyl', 'C=CC'],
  ['tert-butyl', 'C(C)(C)C'],
  ['isopropenyl', 'C(C)=C'],
  ['ethynyl', 'C#C'],
  ['phenyl', 'c9ccccc9'],
  ['p-tolyl', 'c9ccc(C)cc9'],
  ['p-nitrophenyl', 'c9ccc([N+](=O)[O-])cc9'],
  ['m-tolyl', 'c9cccc(C)c9'],
  ['3,5-xylyl', 'c9cc(C)cc(C)c9'],
  ['m-nitrophenyl', 'c9cccc([N+](=O)[O-])c9'],
  ['3,5-dinitrophenyl', 'c9cc([N+](=O)[O-])cc([N+](=O)[O-])c9'],
  ['1-propynyl', 'C#CC'],
  ['o-tolyl', 'c9ccccc9C'],
  ['2,6-xylyl', 'c9c(C)cccc9C'],
  ['trityl', 'C(c9ccccc9)(c8ccccc8)c7ccccc7'],
  ['o-nitrophenyl', 'c9ccccc9[N+](=O)[O-]'],
  ['2,4-dinitrophenyl', 'c9ccc([N+](=O)[O-])cc9[N+](=O)[O-]'],
  ['formyl', 'C=O'],
  ['acetyl', 'C(C)=O'],
  ['benzoyl', 'C(=O)c9ccccc9'],
  ['carboxy', 'C(=O)O'],
  ['methoxycarbonyl', 'C(=O)OC'],
  ['ethoxycarbonyl', 'C(=O)OCC'],
  ['benzyloxycarbonyl', 'C(=O)OCc9ccccc9'],
  ['tert-butoxycarbonyl', 'C(=O)OC(C)(C)C'],
  ['amino', 'N'],
  ['ammonio', '[NH3+]'],
  ['methylamino', 'NC'],
  ['ethylamino', 'NCC'],
  ['phenylamino', 'Nc9ccccc9'],
  ['acetylamino', 'NC(C)=O'],
  ['benzoylamino', 'NC(=O)c9ccccc9'],
  ['benzyloxycarbonylamino', 'NC(=O)OCc9ccccc9'],
  ['dimethylamino', 'N(C)C'],
  ['diethylamino', 'N(CC)CC'],
  ['trimethylammonio', '[N+](C)(C)C'],
  ['phenylazo', 'N=Nc9ccccc9'],
  ['nitroso', 'N=O'],
  ['nitro', '[N+](=O)[O-]'],
  ['hydroxy', 'O'],
  ['methoxy', 'OC'],
  ['ethoxy', 'OCC'],
  ['benzyloxy', 'OCc9ccccc9'],
  ['phenoxy', 'Oc9ccccc9'],
  ['formyloxy', 'OC=O'],
  ['acetoxy', 'OC(C)=O'],
  ['benzoyloxy', 'OC(=O)c9ccccc9'],
  ['methylsulfinyloxy', 'OS(C)=O'],
  ['methylsulfonyloxy', 'OS(C)(=O)=O'],
  ['fluoro', 'F'],
  ['mercapto', 'S'],
  ['methylthio', 'SC'],
  ['methylsulfinyl', 'S(C)=O'],
  ['methylsulfonyl', 'S(C)(=O)=O'],
  ['sulfo', 'S(=O)(=O)O'],
  ['chloro', 'Cl'],
  ['bromo', 'Br'],
  ['iodo', 'I'],
] as const;

/** Priority groups of the neighbours of atom `centre`. */
const ranks = (smiles: string, centre: number) => cipPriority(moleculeFromSmiles(smiles), centre).map((group) => [...group]);

describe('CIP priority', () => {
  it.each(BY_RISING_PRIORITY.slice(1).map(([name, smiles], n) => [name, smiles, BY_RISING_PRIORITY[n]] as const))(
    'puts %s above the group before it in the list',
    (_name, higher, [, lower]) => {
      // the first carbon carries both groups and two hydrogens; written in both orders
      for (const [first, second] of [
        [higher, lower],
        [lower, higher],
      ]) {
        const molecule = moleculeFromSmiles(`C(${first})${second}`);
        const groups = cipPriority(molecule, 0);
        expect(groups.map((group) => group.length)).toEqual([1, 1, 2]);
        expect(groups[0][0] === 1).toBe(first === higher);
      }
    },
  );
  it('groups substituents that constitution does not tell apart', () => {
    expect(ranks('C', 0)).toEqual([[1, 2, 3, 4]]);
    expect(ranks('CC(C)O', 1)).toEqual([[3], [0, 2], [7]]);
    expect(ranks('Oc1ccccc1', 1)).toEqual([[0], [2, 6]]);
    expect(ranks('CS(C)(=O)=O', 1).at(-1)).toEqual([0, 2]);
  });
  it('counts isotopes after atomic numbers everywhere (rule 2)', () => {
    expect(ranks('[2H]C([3H])O', 1)).toEqual([[3], [2], [0], [4]]);
    expect(ranks('[12CH3]C([13CH3])(C)O', 1)).toEqual([[4], [2], [3], [0]]);
    // a longer chain beats an isotope
    expect(ranks('[13CH3]C(CC)O', 1)).toEqual([[4], [2], [0], [8]]);
  });
  it('follows rings with duplicates: rule 1b puts the nearer ring closure first', () => {
    // cyclopropyl over isopropyl: the ring carbons end in a duplicate carbon where the methyls have hydrogen
    expect(ranks('CC(C)C(C1CC1)O', 3)).toEqual([[7], [4], [1], [expect.any(Number)]]);
  });
  it('does not depend on which way alternating double bonds are written', () => {
    const ring = (shift: number) =>
      createMolecule({
        atomicNumbers: [9, 6, 7, 6, 6, 6, 6, 17],
        bonds: [[0, 1, 1], ...[1, 2, 3, 4, 5, 6].map((i) => [i, i === 6 ? 1 : i + 1, (i + shift) % 2 === 0 ? 2 : 1] as const), [7, 4, 1]],
      });
    for (let centre = 1; centre < 7; centre++) expect(cipPriority(ring(0), centre)).toEqual(cipPriority(ring(1), centre));
    // the two sides of phenyl tie, those of 3-pyridyl do not: nitrogen side first
    expect(ranks('Cc1cccnc1', 1)).toEqual([[6], [2], [0]]);
  });
  it('leaves d orbitals out: a phosphoryl oxygen ranks below an alkoxy group, however it is written', () => {
    expect(ranks('CCOP(C)(=O)c1ccccc1', 3)).toEqual([[2], [5], [6], [4]]);
    expect(ranks('CCO[P+](C)([O-])c1ccccc1', 3)).toEqual([[2], [5], [6], [4]]);
  });
  it('stays quick and deterministic for cages', () => {
    // an adamantane and a cubane carbon
    expect(ranks('C1C2CC3CC1CC(C2)C3', 1)[0]).toHaveLength(3);
    expect(ranks('C12C3C4C1C5C2C3C45', 0)[0]).toHaveLength(3);
  });
});
