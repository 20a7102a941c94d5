import { moleculeFromSmiles, radians, turnAbout } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { torsionOfAxis } from './defining-torsion.js';

const torsionOf = (smiles: string, b: number, c: number) => [...torsionOfAxis(moleculeFromSmiles(smiles), b, c)];

// the rule: IUPAC, Basic terminology of stereochemistry (1996), "torsion angle"
describe('the defining torsion', () => {
  it('takes the CIP-highest of substituents that all differ', () => {
    expect(torsionOf('CC(F)C(Cl)Br', 1, 3)).toEqual([2, 1, 3, 5]);
    // the oxygen of an amide carbon, the carbon of its nitrogen
    expect(torsionOf('CC(=O)NC', 1, 3)).toEqual([2, 1, 3, 4]);
    // pyridine nitrogens of 2,2'-bipyridine
    expect(torsionOf('c1ccncc1-c1cccnc1', 5, 6)).toEqual([4, 5, 6, 11]);
    expect(torsionOf('c1ccnc(c1)-c1ccccn1', 4, 6)).toEqual([3, 4, 6, 11]);
  });
  it('takes the unique one where two are alike', () => {
    // the lone hydrogen of an isopropyl group, whatever its rank; the methyl of an ethyl group
    expect(torsionOf('CC(C)CC', 1, 3)).toEqual([8, 1, 3, 4]);
    expect(torsionOf('OCC(F)(F)Cl', 1, 2)).toEqual([0, 1, 2, 5]);
  });
  it('takes the lowest index where all are alike and no geometry is given', () => {
    expect(torsionOf('CC', 0, 1)).toEqual([2, 0, 1, 5]);
    expect(torsionOf('COc1ccccc1', 1, 2)).toEqual([0, 1, 2, 3]);
  });
  it('takes the smallest angle where all are alike and a geometry is given', () => {
    const ethane = moleculeFromSmiles('CC');
    const x = new Float64Array(24);
    x.set([0, 0, 0, 0, 0, 1.5]);
    for (let n = 0; n < 6; n++) {
      const phi = radians(120 * n + (n < 3 ? 0 : 85));
      x.set([Math.cos(phi), Math.sin(phi), n < 3 ? -0.4 : 1.9], 6 + 3 * n);
    }
    // rear hydrogens stand at 85, 205 and 325 degrees: 35 before the front one at 0
    const [i, , , l] = torsionOfAxis(ethane, 0, 1, x);
    expect([i, l]).toEqual([2, 7]);
    turnAbout(x, 0, 1, [5, 6, 7], radians(60));
    // now at 145, 265 and 25
    expect(torsionOfAxis(ethane, 0, 1, x)).toEqual([2, 0, 1, 7]);
    turnAbout(x, 0, 1, [5, 6, 7], radians(-80));
    // 65, 185 and 305: -55 (7), 65 (5) from atom 2, and their copies
    expect(torsionOfAxis(ethane, 0, 1, x)).toEqual([2, 0, 1, 7]);
    // exactly staggered, all angles 60: lowest indices
    turnAbout(x, 0, 1, [5, 6, 7], radians(-5));
    expect(torsionOfAxis(ethane, 0, 1, x)).toEqual([2, 0, 1, 5]);
  });
  it('takes the unique one of three where it is the hydrogen between two chains', () => {
    expect(torsionOf('CCC(CC)C(=O)O', 2, 5)).toEqual([13, 2, 5, 6]);
  });
  it('is refused where no torsion angle exists', () => {
    const ethanol = moleculeFromSmiles('CCO');
    expect(() => torsionOfAxis(ethanol, 0, 2)).toThrow(expect.objectContaining({ code: 'torsion/chain' }));
    expect(() => torsionOfAxis(ethanol, 2, 8)).toThrow(expect.objectContaining({ code: 'torsion/chain' }));
  });
});
