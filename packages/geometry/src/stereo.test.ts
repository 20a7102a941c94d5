import { describe, expect, it } from 'vitest';
import { moleculeFromSmiles } from './smiles.js';
import { openStereo } from './stereo.js';
import { perceiveStereo } from './stereo-perception.js';

const centres = (smiles: string) => moleculeFromSmiles(smiles).stereo.tetrahedral.map(({ atom }) => atom);
const open = (smiles: string) => openStereo(moleculeFromSmiles(smiles)).map(({ message }) => message.split(' is ')[0]);

describe('which atoms and bonds are stereogenic', () => {
  it('lists centres with four different ligands, also the open ones', () => {
    expect(centres('CC(O)F')).toEqual([1]);
    expect(centres('CC(N)C(=O)O')).toEqual([1]);
    expect(centres('CS(=O)CC')).toEqual([1]);
    expect(centres('C[S+]([O-])CC')).toEqual([1]);
    expect(centres('CP(CC)c1ccccc1')).toEqual([1]);
    expect(centres('CP(=O)(CC)OC')).toEqual([1]);
    expect(centres('C[N+](CC)(CCC)CCCC')).toEqual([1]);
    expect(centres('C[Si](F)(Cl)CC')).toEqual([1]);
    expect(centres('CS(=N)(=O)CC')).toEqual([1]);
    expect(centres('CC([2H])O')).toEqual([1]);
  });
  it('leaves out what is none', () => {
    for (const smiles of [
      'CC(C)O',
      'C[C@H](C)O',
      'C[C@@H]1CCCCC1',
      'CN(CC)CCC',
      'C[N@](CC)CCC',
      'CS(=O)C',
      'CS(=O)(=O)CC',
      'c1ccccc1',
      'CC(=O)C',
    ])
      expect(centres(smiles), smiles).toEqual([]);
    // protons on P and S move between oxygens; cages fix their bridgeheads; five rings of one kind
    for (const smiles of [
      'COP(=O)(O)OCC',
      'C1CC2CCC1C2',
      'C1CC2CCC1CC2',
      'C12C3C4C1C5C4C3C25',
      'C12C3C1C4C2C34',
      'C1C2CC3CC1CC(C2)C3',
      'C1[C@H]2C[C@H]3C[C@@H]1C[C@@H](C2)C3',
      'C1C23CC12C3',
      'C1N2CN3CN1CN(C2)C3',
      'OC1=CC=CC=C1',
    ])
      expect(centres(smiles), smiles).toEqual([]);
  });
  it('keeps what the input states for centres that depend on others', () => {
    expect(centres('C[C@H]1CC[C@@H](C)CC1')).toEqual([1, 4]);
    expect(centres('C[C@H](F)[C@H](O)[C@H](F)C')).toEqual([1, 3, 5]);
    expect(centres('C[C@H](F)[C@H](O)[C@@H](F)C')).toEqual([1, 5]);
    expect(centres('C[C@H]1C[C@@]2(C1)C[C@H](C)C2')).toEqual([1, 3, 6]);
    expect(centres('COP(=O)([O-])O[C@H](C)F')).toEqual([6]);
    expect(centres('Cc1ccc2c(c1)C[N@]1C[N@]2Cc2cc(C)ccc12')).toEqual([8, 10]);
    expect(centres('F/C=C/[C@H](O)/C=C\\F')).toEqual([3]);
    expect(centres('F/C=C/[C@H](O)/C=C/F')).toEqual([]);
  });
  it('finds ring centres that an open input leaves to choose', () => {
    expect(open('CC1CCC(C)CC1')).toEqual(['the stereocentre C1', 'the stereocentre C4']);
    expect(open('C1CCC2CCCCC2C1')).toHaveLength(2);
    expect(open('CC1CCCCC1')).toEqual([]);
    expect(open('CC1CC(C)CC(C)C1')).toHaveLength(3);
    expect(open('CC1CC2(C1)CC(C)C2')).toHaveLength(3);
    expect(open('FC=C1CCC(C)CC1')).toHaveLength(2);
    expect(open('OC1C(O)C(O)C(O)C(O)C1O')).toHaveLength(6);
    expect(open('C1CCC2C3CCCCC3CCC2C1')).toHaveLength(4);
    expect(open('C1CC2CCCC3CCCC(C1)C23')).toHaveLength(4);
  });
  it('lists double bonds with two different ligands at each end', () => {
    expect(open('CC=CC')).toEqual(['the double bond C1=C2']);
    expect(open('CC=NO')).toEqual(['the double bond C1=N2']);
    expect(open('CN=NC')).toEqual(['the double bond N1=N2']);
    expect(open('C1CCCC=CCC1')).toEqual(['the double bond C4=C5']);
    expect(open('CC=C=CC')).toEqual(['the axis C1...C3']);
    expect(open('FC=C=C=CF')).toEqual(['the double bond C1=C4']);
    for (const smiles of ['C=CC', 'CC(C)=CC', 'C1CCC=CC1', 'CC=N', 'CC(N)=O', 'C=C=CC', 'c1ccncc1', 'CC=C=C=C(C)C'])
      expect(open(smiles), smiles).toEqual([]);
    // bonds that alternate have no configuration of their own: porphin
    expect(open('C1=CC2=CC3=CC=C(N3)C=C4C=CC(=N4)C=C5C=CC(N5)=CC1=N2')).toEqual([]);
  });
  it('says which atoms are open', () => {
    const [note] = openStereo(moleculeFromSmiles('CC(O)F'));
    expect(note).toEqual({ code: 'stereo/open', message: 'the stereocentre C1 is not specified; one form was chosen', place: { atom: 1 } });
  });
});

describe('configuration in three dimensions', () => {
  // (R)-bromochlorofluoromethane: from the side away from hydrogen, Br - Cl - F run clockwise
  const molecule = moleculeFromSmiles('F[C@](Cl)(Br)[H]');
  const seenFromAbove = (angle: number) => [Math.cos(angle), Math.sin(angle), 0.4];
  const clockwise = Float64Array.from([
    ...seenFromAbove((2 * Math.PI) / 3),
    ...[0, 0, 0],
    ...seenFromAbove((4 * Math.PI) / 3),
    ...seenFromAbove(0),
    ...[0, 0, -1],
  ]);
  it('reads the handedness of a centre, and nothing from a flat one', () => {
    // Br at 0, F at 120, Cl at 240 degrees, hydrogen below: seen from above Br - Cl - F runs clockwise
    expect(perceiveStereo(molecule, clockwise).tetrahedral[0].sign).toBe(molecule.stereo.tetrahedral[0].sign);
    expect(
      perceiveStereo(
        molecule,
        clockwise.map((value, n) => (n % 3 === 2 ? -value : value)),
      ).tetrahedral[0].sign,
    ).toBe(-molecule.stereo.tetrahedral[0].sign);
    expect(
      perceiveStereo(
        molecule,
        clockwise.map((value, n) => (n % 3 === 2 ? 0 : value)),
      ).tetrahedral[0].sign,
    ).toBe(0);
  });
  it('reads cis and trans, and nothing from a twisted bond', () => {
    const butene = moleculeFromSmiles('FC=CF');
    const at = (turn: number) =>
      Float64Array.of(-1, 1, 0, 0, 0, 0, 1.3, 0, 0, 2.3, Math.cos(turn), Math.sin(turn), -1, -1, 0, 2.3, -Math.cos(turn), -Math.sin(turn));
    expect([0, Math.PI / 2, Math.PI].map((turn) => perceiveStereo(butene, at(turn)).doubleBonds[0].cis)).toEqual([true, null, false]);
  });
  it('reads the sense of an axis by the sign of its torsion', () => {
    const allene = moleculeFromSmiles('FC=C=CF');
    const at = (turn: number) =>
      Float64Array.of(
        -1,
        1,
        0,
        0,
        0,
        0,
        1.3,
        0,
        0,
        2.6,
        0,
        0,
        3.6,
        Math.cos(turn),
        Math.sin(turn),
        -1,
        -1,
        0,
        3.6,
        -Math.cos(turn),
        -Math.sin(turn),
      );
    expect([Math.PI / 2, -Math.PI / 2, 0].map((turn) => perceiveStereo(allene, at(turn)).axes[0].sign)).toEqual([1, -1, 0]);
  });
});
