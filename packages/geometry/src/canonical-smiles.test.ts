import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { Molecule as OtherToolkit } from 'openchemlib';
import { describe, expect, it } from 'vitest';
import { canonicalSmiles } from './canonical-smiles.js';
import { createMolecule, type Molecule, neighboursOf } from './molecule.js';
import { moleculeFromSmiles } from './smiles.js';
import { completeStereo } from './stereo.js';
import { elementsOf, LONE_PAIR, toTable } from './stereo-elements.js';

const fixture = (name: string) =>
  readFileSync(new URL(`../fixtures/${name}`, import.meta.url), 'utf8')
    .trim()
    .split('\n');
const nci = fixture('nci.smi').map((line) => line.split(/\s/)[0]);
const canonical = (smiles: string) => canonicalSmiles(moleculeFromSmiles(smiles));

const HARD = [
  'C12C3C4C1C5C4C3C25',
  'C12C3C1C4C2C34',
  'C1C2CC3CC1CC(C2)C3',
  'C12C3C4C5C6C1C7C8C2C9C3C%10C4C5C%11C6C7C8C9C%10%11',
  'C1CC1.C1CCCCC1',
  'CC(=O)O[C@@]12CO[C@@H]1C[C@H](O)[C@]1(C)C(=O)[C@H](OC(C)=O)C3=C(C)[C@@H](OC(=O)[C@H](O)[C@@H](NC(=O)c4ccccc4)c4ccccc4)C[C@@](O)([C@@H](OC(=O)c4ccccc4)[C@H]21)C3(C)C',
  'F/C=C/C=C/C=C\\F',
  'F/C=C/C=CC=C/F',
  'C/C=C/C(/C=C\\C)=C/C',
  'C1=C\\C=C/C=C\\C=C/1',
  'OC(Cl)=[C@]=C(C)F',
  'CC=[C@@]=CC',
  'C1CCCCC=[C@]=CCC1',
  'F/C=C=C=C/Cl',
  'FC(Cl)=C=[C@]=C=C(C)Br',
  'O[C@H]1CC[C@@H](O)CC1',
  'O[C@H]1[C@@H](O)[C@H](O)[C@@H](O)[C@H](O)[C@@H]1O',
  'C[C@@H]1C[C@H](C)C[C@@H](C)C1',
  'C[C@H]1C[C@@]2(C1)C[C@H](C)C2',
  'F/C=C1/CC/C(=C/F)/CC1',
  'C[C@H](O)[C@@H](O)[C@H](C)O',
  'C[S@](=O)c1ccc(C)cc1',
  'C[P@](=O)(c1ccccc1)OC',
  'C[N@@+](CC)(CCC)Cc1ccccc1',
  'Cc1ccc2c(c1)C[N@]1C[N@]2Cc2cc(C)ccc12',
  '[13CH3]C([13CH3])C',
  '[H][H]',
  '[2H]O[2H]',
  'CC(=O)[O-].[NH4+]',
  'C1=CC=C2C=CC=C2C=C1',
  'c1cc2ccc3ccc4ccc1c1c2c3c41',
  'C1=CC2=CC=CC3=C2C1=CC=C3',
  'C1=CC2=C3C1=CC=C4C3=C(C=C2)C=C4',
  'c1cc2cc3ccc(cc4ccc(cc5ccc(cc1n2)[nH]5)n4)[nH]3',
];

/** The same structure with its atoms in another order. */
function renumbered(molecule: Molecule, order: readonly number[]): Molecule {
  const place = new Map(order.map((old, i) => [old, i]));
  const at = (i: number) => (i === LONE_PAIR ? i : (place.get(i) ?? i));
  const key = (i: number) => (i === LONE_PAIR ? Number.POSITIVE_INFINITY : i);
  const exchanges = (from: readonly number[]) => {
    let sign = 1;
    for (let i = 0; i < from.length; i++) for (let j = 0; j < i; j++) if (key(from[j]) > key(from[i])) sign = -sign;
    return sign;
  };
  const ascending = (ligands: readonly number[]) => ligands.slice().sort((p, q) => key(p) - key(q));
  const elements = elementsOf(molecule).map((element) => {
    const moved = element.ligands.map(at);
    if (element.kind === 'tetrahedral')
      return { ...element, atoms: element.atoms.map(at), ligands: ascending(moved), sign: (element.sign * exchanges(moved)) as -1 | 0 | 1 };
    const [left, right] = [moved.slice(0, 2), moved.slice(2)];
    const sign = (element.sign * exchanges(left) * exchanges(right)) as -1 | 0 | 1;
    const [a, b] = element.atoms.map(at);
    const ligands = a < b ? [...ascending(left), ...ascending(right)] : [...ascending(right), ...ascending(left)];
    return { ...element, atoms: [Math.min(a, b), Math.max(a, b)], ligands, sign };
  });
  const moved = createMolecule({
    atomicNumbers: order.map((i) => molecule.atomicNumbers[i]),
    formalCharges: order.map((i) => molecule.formalCharges[i]),
    isotopes: order.map((i) => molecule.isotopes[i]),
    bonds: Array.from(
      { length: molecule.bonds.count },
      (_, n) => [at(molecule.bonds.a[n]), at(molecule.bonds.b[n]), molecule.bonds.order[n]] as const,
    ),
    stereo: toTable(elements),
  });
  return { ...moved, stereo: completeStereo(moved) };
}

describe('canonical SMILES', () => {
  it('reads back as itself', () => {
    for (const smiles of [...HARD, ...nci]) {
      const own = canonical(smiles);
      expect(canonical(own), smiles).toBe(own);
    }
  });

  it('does not depend on the order of atoms', () => {
    const structures = [...HARD, ...HARD, ...nci].map((smiles) => moleculeFromSmiles(smiles));
    fc.assert(
      fc.property(fc.constantFrom(...structures), fc.infiniteStream(fc.double({ min: 0, max: 1, noNaN: true })), (molecule, random) => {
        const keys = Array.from({ length: molecule.atomCount }, (_, i) => [random.next().value, i] as const);
        const order = keys.sort((p, q) => p[0] - q[0]).map(([, i]) => i);
        expect(canonicalSmiles(renumbered(molecule, order))).toBe(canonicalSmiles(molecule));
      }),
      { numRuns: 150, seed: 20261201 },
    );
  });

  it('does not depend on the Kekule form', () => {
    for (const [one, other] of [
      ['CC1=CC=CC=C1C', 'CC1=C(C)C=CC=C1'],
      ['CC1=CC=CC=C1C', 'Cc1ccccc1C'],
      ['C1=CC=C2C=CC=CC2=C1', 'C1=CC2=CC=CC=C2C=C1'],
      ['C1=CNC=C1', 'c1cc[nH]c1'],
      ['C1=CC=CC=CC=C1', 'C=1C=CC=CC=CC=1'],
      ['c1ccc2c(c1)c1ccccc21', 'C1=CC=C2C(=C1)C1=CC=CC=C12'],
      ['C1=CC=C2C=CC=C2C=C1', 'C1=CC2=CC=CC2=CC=C1'],
    ])
      expect(canonical(one)).toBe(canonical(other));
  });

  it('tells stereoisomers, tautomers and isotopes apart', () => {
    const groups = [
      ['C[C@H](N)C(=O)O', 'C[C@@H](N)C(=O)O', 'CC(N)C(=O)O'],
      ['O[C@H]1CC[C@@H](O)CC1', 'O[C@H]1CC[C@H](O)CC1', 'OC1CCC(O)CC1'],
      ['F/C=C/F', 'F/C=C\\F', 'FC=CF'],
      ['F/C=C=C=C/F', 'F/C=C=C=C\\F', 'FC=C=C=CF'],
      ['CC=[C@]=CC', 'CC=[C@@]=CC', 'CC=C=CC'],
      ['C[C@H](F)[C@H](O)[C@@H](F)C', 'C[C@@H](F)[C@H](O)[C@H](F)C', 'C[C@H](F)[C@H](O)[C@H](F)C', 'C[C@H](F)[C@@H](O)[C@H](F)C'],
      ['Oc1ccccn1', 'O=c1cccc[nH]1'],
      ['CC1=C(O)C=C1', 'CC1=CC=C1O'],
      ['CC1=C(O)C=CC=CC=C1', 'CC1=CC=CC=CC=C1O'],
      ['F/C=C1/CC[C@H](C)CC1', 'F/C=C1/CC[C@@H](C)CC1', 'FC=C1CCC(C)CC1'],
      ['C[C@H]1C[C@@]2(C1)C[C@H](C)C2', 'C[C@H]1C[C@@]2(C1)C[C@@H](C)C2', 'CC1CC2(C1)CC(C)C2'],
      ['C[C@H]1C[C@@H](C)C[C@@H](C)C1', 'C[C@@H]1C[C@@H](C)C[C@@H](C)C1', 'CC1CC(C)CC(C)C1'],
      ['CO', '[13CH3]O', 'C[18OH]', 'CO[2H]'],
    ];
    for (const group of groups) expect(new Set(group.map(canonical)).size, group[0]).toBe(group.length);
    // cis,trans-1,3,5-trimethylcyclohexane, with either of its like groups named first
    expect(canonical('C[C@@H]1C[C@@H](C)C[C@@H](C)C1')).toBe(canonical('C[C@@H]1C[C@H](C)C[C@@H](C)C1'));
    // the middle centre of a chain between two like ends of like configuration is none
    expect(canonical('C[C@H](F)[C@H](O)[C@@H](F)C')).toBe(canonical('C[C@H](F)[C@@H](O)[C@@H](F)C'));
  });

  // openchemlib reads both and names the stereoisomer by its own code, which holds no Kekule form; allenes and P are left to the tests above
  it('means the same structure to another reader', () => {
    const code = (smiles: string) => OtherToolkit.fromSmiles(smiles, { noCoordinates: true }).getIDCode();
    const cases = [
      ...nci.slice(0, 150),
      'C[C@H](N)C(=O)O',
      'F/C=C\\F',
      'C[S@](=O)c1ccc(C)cc1',
      'OC[C@H]1O[C@@H](O)[C@H](O)[C@@H](O)[C@@H]1O',
      HARD[5],
    ];
    const differing = cases.filter((smiles) => code(canonical(smiles)) !== code(smiles));
    expect(differing).toEqual([]);
  });

  it('writes what chemists expect of common structures', () => {
    expect(['OCC', 'c1ccccc1OC', 'C1=CC=CN=C1', 'N[C@@H](C)C(O)=O', 'Cl.CN', 'O=N(=O)c1ccccc1'].map(canonical)).toEqual([
      'CCO',
      'COc1ccccc1',
      'c1ccncc1',
      canonical('C[C@H](N)C(=O)O'),
      'CN.Cl',
      canonical('O=N(=O)c1ccccc1'),
    ]);
    expect(neighboursOf(moleculeFromSmiles(canonical('OCC')), 2)).toHaveLength(2);
  });
});
