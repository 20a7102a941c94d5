import { describe, expect, it } from 'vitest';
import { canonicalSmiles } from './canonical-smiles.js';
import { fragmentsOf, largestFragment } from './fragments.js';
import { moleculeFromSmiles } from './smiles.js';

describe('fragments', () => {
  it('are counted in the order of their first atoms, hydrogens with the atom they sit on', () => {
    const { count, ofAtom } = fragmentsOf(moleculeFromSmiles('[Na+].OC.[Cl-]'));
    expect(count).toBe(3);
    expect([...ofAtom]).toEqual([0, 1, 1, 2, 1, 1, 1, 1]);
  });
  it('give the largest organic one, with its stereo and the old indices of its atoms', () => {
    const salt = moleculeFromSmiles('F[P-](F)(F)(F)(F)F.C[C@H](/C=C/C)[NH3+] the salt');
    const { molecule, atoms } = largestFragment(salt);
    expect(canonicalSmiles(molecule)).toBe(canonicalSmiles(moleculeFromSmiles('C[C@H](/C=C/C)[NH3+]')));
    expect(molecule.name).toBe('the salt');
    expect([...atoms].map((i) => salt.atomicNumbers[i])).toEqual([...molecule.atomicNumbers]);
    const allene = largestFragment(moleculeFromSmiles('O.CC=[C@]=CC'));
    expect(canonicalSmiles(allene.molecule)).toBe(canonicalSmiles(moleculeFromSmiles('CC=[C@]=CC')));
  });
  it('prefer carbon, then heavy atoms, then mass, then the first', () => {
    const kept = (smiles: string) => canonicalSmiles(largestFragment(moleculeFromSmiles(smiles)).molecule);
    expect(kept('OS(O)(=O)=O.CN')).toBe('CN');
    expect(kept('CCO.CCCO')).toBe('CCCO');
    expect(kept('CCO.CCS')).toBe('CCS');
    expect(kept('[Na+].[Cl-]')).toBe('[Cl-]');
    expect(kept('C')).toBe('C');
    expect([...largestFragment(moleculeFromSmiles('CO.CO')).atoms]).toEqual([0, 1, 4, 5, 6, 7]);
  });
});
