import { describe, expect, it } from 'vitest';
import { TordialError } from './errors.js';
import { type Molecule, neighboursOf } from './molecule.js';
import { moleculeFromSmiles } from './smiles.js';

const errorOf = (smiles: string): TordialError => {
  try {
    moleculeFromSmiles(smiles);
  } catch (error) {
    if (error instanceof TordialError) return error;
    throw error;
  }
  throw new Error(`${smiles} was accepted`);
};
const symbols = (molecule: Molecule) => [...molecule.atomicNumbers].join(' ');
const order = (molecule: Molecule, i: number, j: number) => {
  for (let n = 0; n < molecule.bonds.count; n++)
    if (molecule.bonds.a[n] === Math.min(i, j) && molecule.bonds.b[n] === Math.max(i, j)) return molecule.bonds.order[n];
  return 0;
};

/** R or S from the priorities of the four ligands, highest first (-1: lone pair): 1-2-3 clockwise seen from the side away from 4 is R. */
function descriptor(molecule: Molecule, atom: number, priorities: readonly number[]): 'R' | 'S' | '?' {
  const centre = molecule.stereo.tetrahedral.find((entry) => entry.atom === atom);
  if (!centre || centre.sign === 0) return '?';
  const place = priorities.map((ligand) => centre.neighbours.indexOf(ligand));
  let inversions = 0;
  for (let i = 0; i < 4; i++) for (let j = 0; j < i; j++) if (place[j] > place[i]) inversions++;
  return centre.sign * (inversions % 2 === 0 ? 1 : -1) > 0 ? 'S' : 'R';
}

describe('atoms of a SMILES', () => {
  it('keeps written atoms in order and adds hydrogens by the atom they sit on', () => {
    const ethanol = moleculeFromSmiles('CCO');
    expect(symbols(ethanol)).toBe('6 6 8 1 1 1 1 1 1');
    expect([3, 4, 5, 6, 7, 8].map((h) => neighboursOf(ethanol, h)[0])).toEqual([0, 0, 0, 1, 1, 2]);
    const written = moleculeFromSmiles('[H]OC([2H])C');
    expect(symbols(written)).toBe('1 8 6 1 6 1 1 1 1');
    expect([...written.isotopes]).toEqual([0, 0, 0, 2, 0, 0, 0, 0, 0]);
    expect(written.atomCount).toBe(9);
  });
  it('takes a name after white space', () => {
    expect(moleculeFromSmiles('  CC  an invented name ').name).toBe('an invented name');
  });
  it('reads charges, isotopes and ring numbers in all their forms', () => {
    expect([...moleculeFromSmiles('[NH4+].[O--]').formalCharges.slice(0, 2)]).toEqual([1, -2]);
    expect(moleculeFromSmiles('[13CH4]').isotopes[0]).toBe(13);
    for (const ring of ['C1CC1', 'C%12CC%12', 'C%(123)CC%(123)', 'C-1CC1', 'C1CC-1', 'C0CC0'])
      expect(
        moleculeFromSmiles(ring).rings.map((r) => r.length),
        ring,
      ).toEqual([3]);
    expect(moleculeFromSmiles('C1.C1').bonds.count).toBe(7);
    for (const ring of ['C=1CC1', 'C1CC=1', 'C=1CC=1']) expect(order(moleculeFromSmiles(ring), 0, 2), ring).toBe(2);
  });
  it('fills normal valences', () => {
    // OpenSMILES specification 1.0, section 3.1.5
    const hydrogens = (smiles: string) => [...moleculeFromSmiles(smiles).atomicNumbers].filter((z) => z === 1).length;
    expect(['B', 'C', 'N', 'O', 'F', 'P', 'S', 'Cl', 'Br', 'I'].map(hydrogens)).toEqual([3, 4, 3, 2, 1, 3, 2, 1, 1, 1]);
    expect(hydrogens('CP(=O)C')).toBe(7);
    expect(hydrogens('CS(=O)C')).toBe(6);
    expect(hydrogens('OS(=O)(=O)O')).toBe(2);
    expect(hydrogens('[O-]Cl(=O)(=O)=O')).toBe(0);
    expect(hydrogens('O=N(=O)C')).toBe(3);
  });
});

describe('alternating bonds', () => {
  it('fit lower-case rings', () => {
    const doubles = (smiles: string) => [...moleculeFromSmiles(smiles).bonds.order].filter((n) => n === 2).length;
    expect(doubles('c1ccccc1')).toBe(3);
    expect(doubles('c1cc[nH]c1')).toBe(2);
    expect(doubles('c1ccc2cccc2cc1')).toBe(5);
    expect(doubles('O=c1cc[nH]cc1')).toBe(3);
    expect(doubles('Cn1c(=O)c2c(ncn2C)n(C)c1=O')).toBe(4);
    expect(doubles('[cH-]1cccc1')).toBe(2);
    expect(doubles('[cH+]1cccccc1')).toBe(3);
    expect(doubles('c1cc[o+]cc1')).toBe(3);
    expect(doubles('c1cc[se]c1')).toBe(2);
    expect(doubles('c1cc2cc3ccc(cc4ccc(cc5ccc(cc1n2)[nH]5)n4)[nH]3')).toBe(11);
    expect(
      doubles(
        'c12c3c4c5c1c6c7c8c2c9c1c3c2c3c4c4c%10c5c5c6c6c7c7c%11c8c9c8c9c1c2c1c2c3c4c3c4c%10c5c5c6c6c7c7c%11c8c8c9c1c1c2c3c2c4c5c6c3c7c8c1c23',
      ),
    ).toBe(30);
  });
  it('leave the bond between two rings single', () => {
    expect(order(moleculeFromSmiles('c1ccccc1c1ccccc1'), 5, 6)).toBe(1);
  });
  it('keep the benzene rings of biphenylene', () => {
    const molecule = moleculeFromSmiles('c1ccc2c(c1)c1ccccc21');
    const four = molecule.rings.find((ring) => ring.length === 4) ?? [];
    const joining = [...four].map((i, n) => order(molecule, i, four[(n + 1) % 4]));
    expect(joining.filter((n) => n === 2).length).toBeLessThan(3);
    const exocyclic = [...four].filter((i) => !molecule.rings.some((ring) => ring.length === 6 && ring.includes(i)));
    expect(exocyclic).toEqual([]);
  });
  it('are refused where none fit', () => {
    expect(errorOf('c1ccnc1').code).toBe('molecule/kekule');
    expect(errorOf('c1cccc1').message).toMatch(/hydrogen \(\[nH\]\)/);
    expect(errorOf('cc').code).toBe('molecule/kekule');
    expect(errorOf('Cc').code).toBe('molecule/kekule');
  });
});

describe('errors of a SMILES', () => {
  it('name the position', () => {
    const cases: [string, number][] = [
      ['', 0],
      ['C(', 1],
      ['C)', 1],
      ['C(C', 1],
      ['C()C', 2],
      ['(C)', 0],
      ['C=', 1],
      ['C==C', 2],
      ['=C', 0],
      ['C1CC', 1],
      ['C11', 2],
      ['CX', 1],
      ['C[X]', 1],
      ['C[C', 1],
      ['CCNa', 3],
      ['C%1C', 1],
      ['C.', 1],
      ['.C', 0],
      ['C..C', 2],
      ['C(=)C', 2],
      ['C12CC12', 6],
      ['C=1CC#1', 6],
      ['C/1CCCCCC/1', 10],
      ['CC!', 2],
      ['[C@@@H]', 0],
      ['[HH2]', 0],
      ['C((C))', 2],
      ['C(1)C1', 2],
    ];
    for (const [smiles, position] of cases) {
      const error = errorOf(smiles);
      expect([smiles, error.code, error.place.position]).toEqual([smiles, 'smiles/syntax', position]);
      expect(error.message).toContain(`character ${position + 1}`);
    }
  });
  it('refuse what is no single structure', () => {
    for (const smiles of ['C*', '[*]C', 'C>>C', 'C$C', 'C~C', '[Pt@SP1](F)(Cl)(Br)I', 'C[CH2] |^1:1|'])
      expect(errorOf(smiles).code, smiles).toBe('smiles/unsupported');
  });
  it('refuse radicals and impossible valences, naming the atom', () => {
    expect(errorOf('C[CH2]')).toMatchObject({ code: 'molecule/radical', place: { atom: 1 } });
    expect(errorOf('[O]')).toMatchObject({ code: 'molecule/valence' });
    expect(errorOf('CC(C)(C)(C)C')).toMatchObject({ code: 'molecule/valence', place: { atom: 1 } });
    expect(errorOf('CN(C)(C)C')).toMatchObject({ code: 'molecule/valence', place: { atom: 1 } });
    expect(errorOf('CF(C)')).toMatchObject({ code: 'molecule/valence', place: { atom: 1 } });
  });
  it('refuse two substituents on one side of a double bond', () => {
    expect(errorOf('F/C(\\Cl)=C/F')).toMatchObject({ code: 'smiles/stereo', place: { atom: 1 } });
  });
  it('keep to the limits', () => {
    expect(() => moleculeFromSmiles('C'.repeat(400))).toThrow(/limit of 1000/);
    expect(moleculeFromSmiles('C'.repeat(400), { atoms: 2000 }).atomCount).toBe(1202);
    expect(() => moleculeFromSmiles('C'.repeat(30), { recordLength: 20 })).toThrow(TordialError);
    expect(() => moleculeFromSmiles('C1CC1', { rings: 0 })).toThrow(/limit of 0/);
  });
});

// R and S of these compounds as PubChem and textbooks give them with the same SMILES
describe('configuration of a SMILES', () => {
  it('gives L-alanine S in every writing', () => {
    for (const [smiles, c, n, carboxyl, methyl] of [
      ['C[C@H](N)C(=O)O', 1, 2, 3, 0],
      ['N[C@@H](C)C(=O)O', 1, 0, 3, 2],
      ['[C@@H](N)(C(=O)O)C', 0, 1, 2, 5],
      ['OC(=O)[C@@H](N)C', 3, 4, 1, 5],
    ] as const) {
      const molecule = moleculeFromSmiles(smiles);
      const hydrogen = [...neighboursOf(molecule, c)].find((i) => molecule.atomicNumbers[i] === 1) ?? -9;
      expect(descriptor(molecule, c, [n, carboxyl, methyl, hydrogen]), smiles).toBe('S');
    }
    const explicit = moleculeFromSmiles('[H][C@@](C)(N)C(=O)O');
    expect(descriptor(explicit, 1, [3, 4, 2, 0])).toBe('S');
  });
  it('gives (R)-CHFClBr and (S)-CHFClBr', () => {
    expect(descriptor(moleculeFromSmiles('F[C@](Cl)(Br)[H]'), 1, [3, 2, 0, 4])).toBe('R');
    expect(descriptor(moleculeFromSmiles('F[C@@](Cl)(Br)[H]'), 1, [3, 2, 0, 4])).toBe('S');
  });
  it('reads sulfoxides with their lone pair: esomeprazole is S', () => {
    const molecule = moleculeFromSmiles('CC1=CN=C(C(=C1OC)C)C[S@](=O)C2=NC3=C(N2)C=C(C=C3)OC');
    const sulfur = [...molecule.atomicNumbers].indexOf(16);
    const [methylene, oxygen, benzimidazole] = neighboursOf(molecule, sulfur);
    // priorities: O, then C(N,N,N), then C(C,H,H), then the lone pair
    expect(descriptor(molecule, sulfur, [oxygen, benzimidazole, methylene, -1])).toBe('S');
  });
  it('reads double bonds', () => {
    const cis = (smiles: string) => moleculeFromSmiles(smiles).stereo.doubleBonds.map((bond) => bond.cis);
    // OpenSMILES specification 1.0, section 3.9.3
    for (const trans of ['F/C=C/F', 'F\\C=C\\F', 'C(\\F)=C/F', 'F/C=C/1.F1', 'F/C=C1.F\\1']) expect(cis(trans), trans).toEqual([false]);
    for (const together of ['F/C=C\\F', 'F\\C=C/F', 'C(/F)=C/F']) expect(cis(together), together).toEqual([true]);
    expect(cis('FC=CF')).toEqual([null]);
    expect(cis('C/C=N/O')).toEqual([false]);
    expect(cis('C1CC/C=C/CCC1')).toEqual([false]);
    expect(cis('CC=C')).toEqual([]);
    expect(cis('C1CCC=CCC1')).toEqual([]);
  });
  it('reads allenes: OpenSMILES gives OC(Cl)=[C@]=C(C)F as counter-clockwise', () => {
    const [axis] = moleculeFromSmiles('OC(Cl)=[C@]=C(C)F').stereo.axes;
    expect(axis).toMatchObject({ a: 1, b: 4, substituentA: 0, substituentB: 5, sign: 1 });
    expect(moleculeFromSmiles('OC(Cl)=[C@@]=C(C)F').stereo.axes[0].sign).toBe(-1);
    expect(moleculeFromSmiles('OC=[C@]=CC').stereo.axes).toHaveLength(1);
    expect(moleculeFromSmiles('CC=C=C').stereo.axes).toEqual([]);
  });
});
