import { describe, expect, it } from 'vitest';
import { distance, radians, torsion, wrapRadians } from './internal-coordinates.js';
import { createMolecule } from './molecule.js';
import { sidesOfBond, turnAbout } from './turn.js';

// ring 0-1-2 with a tail 2-3-4 and 3-5, and a fragment of its own (6)
const molecule = createMolecule({
  atomicNumbers: [6, 6, 6, 6, 8, 1, 10],
  bonds: [
    [0, 1, 1],
    [1, 2, 1],
    [0, 2, 1],
    [2, 3, 1],
    [3, 4, 1],
    [3, 5, 1],
  ],
});
const x = Float64Array.from({ length: 21 }, (_, n) => 3 * Math.sin(5 * n * n + 1));

describe('sides of a bond', () => {
  it('part the fragment, axis atoms included', () => {
    expect(sidesOfBond(molecule, 2, 3)).toEqual({ a: Int32Array.of(0, 1, 2), b: Int32Array.of(3, 4, 5) });
    expect(sidesOfBond(molecule, 4, 3)).toEqual({ a: Int32Array.of(4), b: Int32Array.of(0, 1, 2, 3, 5) });
  });
  it('do not exist for a ring bond', () => {
    expect(sidesOfBond(molecule, 0, 2)).toBeNull();
  });
  it('of atoms that are not bonded are refused', () => {
    expect(() => sidesOfBond(molecule, 0, 3)).toThrow(expect.objectContaining({ code: 'molecule/bond' }));
  });
});

describe('turning a side', () => {
  it('raises every torsion across the bond by the angle and leaves each side rigid', () => {
    for (const [a, b] of [
      [2, 3],
      [3, 2],
    ]) {
      const turned = x.slice();
      const sides = sidesOfBond(molecule, a, b);
      turnAbout(turned, a, b, sides?.b ?? [], radians(40));
      for (const i of sides?.a ?? [])
        for (const j of sides?.b ?? [])
          if (i !== a && j !== b)
            expect(wrapRadians(torsion(turned, i, a, b, j) - torsion(x, i, a, b, j) - radians(40))).toBeCloseTo(0, 12);
      for (const side of [sides?.a ?? [], sides?.b ?? []])
        for (const i of side) for (const j of side) expect(distance(turned, i, j)).toBeCloseTo(distance(x, i, j), 12);
      expect([...turned.slice(3 * a, 3 * a + 3), ...turned.slice(3 * b, 3 * b + 3)]).toEqual([
        ...x.slice(3 * a, 3 * a + 3),
        ...x.slice(3 * b, 3 * b + 3),
      ]);
    }
  });
  it('refuses an axis of no length', () => {
    expect(() => turnAbout(new Float64Array(21), 2, 3, [4], 1)).toThrow(expect.objectContaining({ code: 'geometry/axis' }));
  });
});
