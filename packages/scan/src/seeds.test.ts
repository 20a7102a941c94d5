import { mmff94 } from '@tordial/forcefield';
import { distance, embed, moleculeFromSmiles, neighboursOf, torsion, wrapRadians } from '@tordial/geometry';
import { describe, expect, test } from 'vitest';
import { drivenRotor } from './driven-rotor.js';
import { relax } from './minimise.js';
import { invertedNitrogens } from './nitrogen-inversion.js';
import { otherRotors, turnedRotors, turnedTogether } from './turned-rotors.js';

describe('inverted nitrogens', () => {
  test('keep their bond lengths and end on the other side of their neighbours', () => {
    const molecule = moleculeFromSmiles('CCN(C)CC');
    const x = relax(molecule, mmff94(molecule), embed(molecule)).coordinates;
    const [image, ...others] = invertedNitrogens(molecule, drivenRotor(molecule, [0, 1, 2, 3]), x);
    expect(others).toHaveLength(0);
    const [p, q, r] = neighboursOf(molecule, 2);
    for (const j of [p, q, r]) expect(distance(image, 2, j)).toBeCloseTo(distance(x, 2, j), 12);
    const height = (y: Float64Array) => torsion(y, p, q, r, 2);
    expect(height(image)).toBeCloseTo(-height(x), 10);
    const relaxed = relax(molecule, mmff94(molecule), image).coordinates;
    expect(Math.sign(height(relaxed))).toBe(-Math.sign(height(x)));
  });

  test('are none where the nitrogen is planar or far from the axis', () => {
    const amide = moleculeFromSmiles('CC(=O)N(C)C');
    const flat = relax(amide, mmff94(amide), embed(amide)).coordinates;
    expect(invertedNitrogens(amide, drivenRotor(amide, [0, 1, 3, 4]), flat)).toHaveLength(0);
    const far = moleculeFromSmiles('CCCCCN(C)C');
    expect(invertedNitrogens(far, drivenRotor(far, [0, 1, 2, 3]), embed(far))).toHaveLength(0);
  });
});

describe('other rotors', () => {
  const molecule = moleculeFromSmiles('CC(C)NCCCOc1ccccc1');
  const driven = drivenRotor(molecule, [4, 5, 6, 7]);
  const rotors = otherRotors(molecule, driven);

  test('are all but the driven one, nearest first, with the turns that symmetry leaves different', () => {
    expect(rotors.map(({ axis }) => axis.join('-'))).not.toContain('5-6');
    expect(rotors.map(({ distance: steps }) => steps)).toEqual([0, 0, 1, 1, 2, 3, 3]);
    const turnsOf = (a: number, b: number) =>
      rotors.find(({ axis }) => axis[0] === a && axis[1] === b)?.turns.map((turn) => Math.round((turn * 180) / Math.PI));
    expect(turnsOf(1, 0)).toEqual([60]);
    expect(turnsOf(7, 8)).toEqual([60, 120]);
    expect(turnsOf(5, 4)).toEqual([60, 120, 180, 240, 300]);
  });

  test('turn several at once by every second turn, each choice of rotors once', () => {
    const x = embed(molecule);
    const coarse = rotors.map(({ turns }) => Math.floor(turns.length / 2));
    const pairs = coarse.reduce((sum, p, n) => sum + coarse.slice(n + 1).reduce((inner, q) => inner + p * q, 0), 0);
    const turned = turnedTogether(rotors, 2, x);
    expect(turned).toHaveLength(pairs);
    for (const y of turned) expect(torsion(y, 4, 5, 6, 7)).toBeCloseTo(torsion(x, 4, 5, 6, 7), 10);
    expect(new Set(turned.map((y) => y.join())).size).toBe(pairs);
    expect(turnedTogether(rotors, 0, x)).toEqual([x]);
  });

  test('leave the driven torsion as it is and turn their own', () => {
    const x = embed(molecule);
    const turned = turnedRotors(rotors, x);
    expect(turned).toHaveLength(rotors.reduce((sum, { turns }) => sum + turns.length, 0));
    for (const y of turned) expect(torsion(y, 4, 5, 6, 7)).toBeCloseTo(torsion(x, 4, 5, 6, 7), 10);
    expect(Math.abs(wrapRadians(torsion(turned[0], 3, 4, 5, 6) - torsion(x, 3, 4, 5, 6)))).toBeCloseTo(Math.PI / 3, 10);
  });
});
