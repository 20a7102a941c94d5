import { moleculeFromSmiles } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { checkTorsion } from './check-torsion.js';

const failure = (smiles: string, atoms: number[]) => {
  try {
    checkTorsion(moleculeFromSmiles(smiles), atoms);
  } catch (error) {
    return error as { code: string; message: string; place: object };
  }
  return null;
};

describe('checking a torsion', () => {
  it('passes four atoms bonded in a chain, in either direction, double bonds included', () => {
    for (const atoms of [
      [0, 1, 2, 3],
      [3, 2, 1, 0],
      [8, 0, 1, 2],
    ])
      expect(checkTorsion(moleculeFromSmiles('COc1ccccc1'), atoms)).toEqual(atoms);
    expect(checkTorsion(moleculeFromSmiles('CC=CC'), [0, 1, 2, 3])).toEqual([0, 1, 2, 3]);
  });
  it('names an index out of range, an atom named twice and a wrong count', () => {
    expect(failure('CCCC', [0, 1, 2, 14])).toMatchObject({
      code: 'torsion/index',
      message: expect.stringMatching(/no atom 14.*14 atoms.*0 to 13/),
    });
    expect(failure('CCCC', [0, 1, 2, -1])?.code).toBe('torsion/index');
    expect(failure('CCCC', [0, 1, 2, 2.5])?.code).toBe('torsion/index');
    expect(failure('CCCC', [0, 1, 2, Number.NaN])?.code).toBe('torsion/index');
    expect(failure('CCCC', [0, 1, 2, 0])).toMatchObject({ code: 'torsion/index', message: expect.stringContaining('atom 0 twice') });
    expect(failure('CCCC', [0, 1, 2])?.code).toBe('torsion/index');
  });
  it('names the pair that is not bonded and lists torsions that would work, the nearest first', () => {
    const error = failure('CCOC(=O)c1ccccc1', [1, 2, 3, 5 + 1]);
    expect(error).toMatchObject({
      code: 'torsion/chain',
      place: { atom: 3 },
      message: expect.stringContaining('atoms 3 and 6 are not bonded'),
    });
    expect(error?.message).toMatch(/torsions that can be driven: 1,2,3,4 \(ester\)/);
    expect(failure('C', [0, 1, 2, 3])?.message).toContain('no bond that turns');
  });
  it('refuses ring bonds and linear centres', () => {
    expect(failure('COc1ccccc1', [1, 2, 3, 4])).toMatchObject({
      code: 'torsion/ring',
      message: expect.stringMatching(/between 2 and 3.*0,1,2,3 \(aryl ether\)/),
    });
    expect(failure('CC#CC', [0, 1, 2, 3])).toMatchObject({ code: 'torsion/linear', place: { atom: 1 } });
    expect(failure('CCC#CCC', [0, 1, 2, 3])).toMatchObject({ code: 'torsion/linear', place: { atom: 2 } });
  });
  it('cuts long lists of suggestions', () => {
    expect(failure('CCCCCCCCCCCCCC', [0, 1, 2, 4])?.message).toMatch(/and 5 more$/);
  });
});
