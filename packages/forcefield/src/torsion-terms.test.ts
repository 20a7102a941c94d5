import { createMolecule } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { mmff94 } from './mmff94.js';
import { torsionTermsOn } from './torsion-terms.js';

describe('the torsion terms on a bond', () => {
  // ethane
  const molecule = createMolecule({
    atomicNumbers: [6, 6, 1, 1, 1, 1, 1, 1],
    bonds: [
      [0, 1, 1],
      [0, 2, 1],
      [0, 3, 1],
      [0, 4, 1],
      [1, 5, 1],
      [1, 6, 1],
      [1, 7, 1],
    ],
  });
  const { parameters } = mmff94(molecule);

  it('are written from the side that was asked for', () => {
    const terms = torsionTermsOn(parameters, 1, 0);
    expect(terms).toHaveLength(9);
    for (const { atoms, types } of terms) {
      expect(atoms.slice(1, 3)).toEqual([1, 0]);
      expect(atoms[0]).toBeGreaterThan(4);
      expect(types).toEqual([5, 1, 1, 5]);
    }
    expect(torsionTermsOn(parameters, 0, 1)).toHaveLength(9);
  });

  it('carry their constants and where these come from', () => {
    // MMFFTOR.PAR, J. Comput. Chem. 17, 587 (1996): HC-CR-CR-HC
    expect(torsionTermsOn(parameters, 0, 1)[0]).toMatchObject({ class: 0, v: [0.284, -1.386, 0.314], source: 'specific' });
  });

  it('are none on a bond that turns nothing', () => {
    expect(torsionTermsOn(parameters, 0, 2)).toEqual([]);
  });
});
