import { mmff94 } from '@tordial/forcefield';
import { automorphisms, degrees, moleculeFromSmiles, perceiveStereo, symmetricRmsd, torsion } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { conformers } from './conformers.js';

const search = (smiles: string, options: Parameters<typeof conformers>[2] = {}) => {
  const molecule = moleculeFromSmiles(smiles);
  return { molecule, ...conformers(molecule, mmff94(molecule), options) };
};

describe('conformers', () => {
  // n-pentane: tt, tg+ and tg-, g+g+ and g-g-, and the distorted pair g+x- with its mirror image, the two ends not told apart
  // (J. M. L. Martin, J. Phys. Chem. A 117, 3118 (2013))
  it('finds those of n-pentane and their order', () => {
    const { molecule, conformers: found } = search('CCCCC', { count: 30, tolerance: 1e-4 });
    const names = found.map(({ coordinates: x }) =>
      [torsion(x, 0, 1, 2, 3), torsion(x, 1, 2, 3, 4)].map((phi) => (Math.abs(degrees(phi)) > 120 ? 't' : phi > 0 ? 'g+' : 'g-')).join(''),
    );
    expect(names[0]).toBe('tt');
    for (const name of ['g+g+', 'g-g-']) expect(names).toContain(name);
    // relabelling the two ends makes tg and gt one
    expect(names.filter((name) => name === 'tg+' || name === 'g+t')).toHaveLength(1);
    expect(names.filter((name) => name === 'tg-' || name === 'g-t')).toHaveLength(1);
    const at = (wanted: readonly string[]) => found.filter((_, n) => wanted.includes(names[n])).map(({ relativeEnergy }) => relativeEnergy);
    // 0.61, 0.96 and 2.81 kcal/mol by CCSD(T) (same source, from memory); MMFF94s comes within half a kcal/mol
    for (const energy of at(['tg+', 'g+t', 'tg-', 'g-t'])) expect(Math.abs(energy - 0.61)).toBeLessThan(0.5);
    for (const energy of at(['g+g+', 'g-g-'])) expect(Math.abs(energy - 0.96)).toBeLessThan(0.7);
    const group = automorphisms(molecule);
    for (let i = 0; i < found.length; i++)
      for (let j = 0; j < i; j++)
        if (Math.abs(found[i].energy - found[j].energy) < 0.01)
          expect(symmetricRmsd(molecule, found[i].coordinates, found[j].coordinates, group)).toBeGreaterThan(0.1);
  });

  it('leaves one for a molecule that has one', () => {
    expect(search('c1ccccc1', { count: 5 }).conformers).toHaveLength(1);
    expect(search('C1C2CC3CC1CC(C2)C3', { count: 5 }).conformers).toHaveLength(1);
    expect(search('CC', { count: 5 }).conformers).toHaveLength(1);
  });

  it('finds chair and twist boat of cyclohexane', () => {
    // the twist boat lies about 5.5 above: E. L. Eliel, S. H. Wilen, Stereochemistry of Organic Compounds (1994), from memory
    const { conformers: found } = search('C1CCCCC1', { count: 30 });
    expect(Math.abs(degrees(torsion(found[0].coordinates, 0, 1, 2, 3)))).toBeGreaterThan(50);
    const twist = found.find(({ relativeEnergy }) => relativeEnergy > 1);
    expect(twist?.relativeEnergy).toBeGreaterThan(4.5);
    expect(twist?.relativeEnergy).toBeLessThan(7);
  });

  it('keeps stated configurations, and gives an open one to all alike unless told otherwise', () => {
    const stated = search('C/C=C/[C@H](O)CC', { count: 10 });
    for (const { coordinates } of stated.conformers) expect(perceiveStereo(stated.molecule, coordinates)).toEqual(stated.molecule.stereo);
    const configurations = (openStereo: 'one' | 'any') => {
      const { molecule, conformers: found, notes } = search('CC(O)C(N)CC', { count: 20, openStereo });
      expect(notes.filter(({ code }) => code === 'stereo/open').length).toBeGreaterThan(0);
      return new Set(
        found.map(({ coordinates }) =>
          perceiveStereo(molecule, coordinates)
            .tetrahedral.map(({ sign }) => sign)
            .join(),
        ),
      );
    };
    expect(configurations('one').size).toBe(1);
    expect(configurations('any').size).toBe(4);
  });

  it('obeys window and count, sorts by energy and repeats to the last bit', () => {
    const first = search('OCCCO', { count: 12, window: 3, seed: 4 });
    const again = search('OCCCO', { count: 12, window: 3, seed: 4 });
    expect(again.conformers).toEqual(first.conformers);
    const energies = first.conformers.map(({ relativeEnergy }) => relativeEnergy);
    expect(energies[0]).toBe(0);
    expect(energies).toEqual(energies.toSorted((p, q) => p - q));
    expect(Math.max(...energies)).toBeLessThanOrEqual(3);
    expect(energies.length).toBeGreaterThan(3);
    expect(first.conformers.every(({ converged }) => converged)).toBe(true);
    expect(search('OCCCO', { count: 2 }).conformers.length).toBeLessThanOrEqual(2);
  });

  // the lowest of 20 relaxed conformers of RDKit 2022.09.3 (seed 1), MMFF94s, kcal/mol
  it.each<[string, number]>([
    ['CCCCOC(=O)CCc1ccccc1', 3.654],
    ['CC(C)C[C@H](NC(C)=O)C(=O)NCCO', 3.298],
    ['OC[C@H]1O[C@@H](O)[C@H](O)[C@@H](O)[C@@H]1O', 79.835],
    ['O=C(CCCCBr)Nc1ccccc1F', 9.898],
    ['CCS(=O)(=O)CCCSc1ccccc1', 9.802],
  ])('comes within 1 kcal/mol of a toolkit for %s or below', (smiles, energy) => {
    const { conformers: found } = search(smiles, { count: 20 });
    expect(found[0].energy).toBeLessThanOrEqual(energy + 1);
  });

  it('refuses settings out of range', () => {
    expect(() => search('CC', { count: 0 })).toThrow(expect.objectContaining({ code: 'conformers/settings' }));
    expect(() => search('CC', { count: 5, starts: 4 })).toThrow(expect.objectContaining({ code: 'conformers/settings' }));
    expect(() => search('CC', { window: Number.NaN })).toThrow(expect.objectContaining({ code: 'conformers/settings' }));
  });
});
