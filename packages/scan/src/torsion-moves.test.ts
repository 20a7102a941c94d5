import { angle, distance, embed, moleculeFromSmiles, neighboursOf, perceiveStereo, seededRandom, torsion } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { findRotors } from './rotors/index.js';
import { movableRotors, torsionMove } from './torsion-moves.js';

describe('turned copies of a structure', () => {
  const molecule = moleculeFromSmiles('CC[C@H](O)CC(=O)NCc1ccccc1');
  const rotors = movableRotors(findRotors(molecule));
  const x = embed(molecule);

  it('leaves methyls out of the bonds to turn', () => {
    expect(rotors.length).toBeGreaterThan(4);
    expect(rotors.some(({ axis }) => axis[0] === 0 || axis[1] === 0)).toBe(false);
  });

  it('changes one to three torsion angles and nothing else', () => {
    const random = seededRandom(1);
    for (let n = 0; n < 20; n++) {
      const moved = torsionMove(molecule, rotors, x, random);
      if (moved === null) throw new Error('no move found');
      for (let j = 0; j < molecule.atomCount; j++)
        for (const i of neighboursOf(molecule, j)) {
          expect(distance(moved, i, j)).toBeCloseTo(distance(x, i, j), 9);
          for (const k of neighboursOf(molecule, j)) if (k > i) expect(angle(moved, i, j, k)).toBeCloseTo(angle(x, i, j, k), 7);
        }
      expect(perceiveStereo(molecule, moved)).toEqual(perceiveStereo(molecule, x));
      const turned = rotors.filter(({ torsion: [i, j, k, l] }) => Math.cos(torsion(moved, i, j, k, l) - torsion(x, i, j, k, l)) < 0.999);
      expect(turned.length).toBeLessThanOrEqual(3);
      for (let i = 0; i < molecule.atomCount; i++)
        for (let j = 0; j < i; j++) if (![...neighboursOf(molecule, i)].includes(j)) expect(distance(moved, i, j)).toBeGreaterThan(1.2);
    }
  });

  it('gives up where every turn puts atoms on each other', () => {
    // all atoms at nearly one point
    const heap = x.map((v) => 0.05 * v);
    expect(torsionMove(molecule, rotors, heap, seededRandom(1))).toBeNull();
  });
});
