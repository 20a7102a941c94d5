import { describe, expect, it } from 'vitest';
import { moleculeFromSmiles } from './smiles.js';

/** Sizes of the classes of atoms of one element, ascending. */
function sizes(smiles: string, atomicNumber = 6): number[] {
  const { atomicNumbers, symmetryClasses } = moleculeFromSmiles(smiles);
  const counts = new Map<number, number>();
  symmetryClasses.forEach((own, i) => {
    if (atomicNumbers[i] === atomicNumber) counts.set(own, (counts.get(own) ?? 0) + 1);
  });
  return [...counts.values()].sort((p, q) => p - q);
}

describe('symmetry classes', () => {
  // numbers of 13C signals, a textbook measure of equivalent carbons
  it('count equivalent carbons', () => {
    expect(sizes('c1ccccc1')).toEqual([6]);
    expect(sizes('Cc1ccccc1C')).toEqual([2, 2, 2, 2]);
    expect(sizes('c1ccc2ccccc2c1')).toEqual([2, 4, 4]);
    expect(sizes('C1C2CC3CC1CC(C2)C3')).toEqual([4, 6]);
    expect(sizes('C12C3C4C1C5C4C3C25')).toEqual([8]);
    expect(sizes('CC(C)(C)O')).toEqual([1, 3]);
  });
  it('tell the three kinds of carbon in cuneane apart, and rings beside each other', () => {
    // two carbons of both cyclobutane rings' shared edge, two and four others: point group C2v
    expect(sizes('C12C3C4C1C4C5C3C25')).toEqual([2, 2, 4]);
    expect(sizes('C1CC1.C1CCCCC1')).toEqual([3, 6]);
  });
  it('do not see how resonance is written', () => {
    expect(sizes('CC(=O)[O-]', 8)).toEqual([2]);
    expect(sizes('C[N+](=O)[O-]', 8)).toEqual([2]);
    expect(sizes('CC(=O)O', 8)).toEqual([1, 1]);
  });
  it('see isotopes', () => {
    expect(sizes('[13CH3]C')).toEqual([1, 1]);
    expect(sizes('[2H]C', 1)).toEqual([1, 3]);
  });
  it('run from 0 without gaps', () => {
    const { symmetryClasses } = moleculeFromSmiles('CCO');
    expect([...new Set(symmetryClasses)].sort()).toEqual([0, 1, 2, 3, 4, 5]);
  });
});
