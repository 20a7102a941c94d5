import { createMolecule, radians } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { barrierErrorCaution, crossingCaution, ESTIMATE_CAUTION, hydrogenBondCaution } from './cautions.js';
import { isometries } from './isometries.js';
import { invertingNitrogens, pyramidHeight } from './nitrogen-pyramids.js';

describe('cautions', () => {
  it('defer to experiment and the specialist, and state the assumed error and the place of a crossing', () => {
    expect(ESTIMATE_CAUTION.message).toMatch(/experiment and the responsible specialist/);
    expect(barrierErrorCaution({ error: 3, reason: 'torsion terms on the axis are wildcards' }).message).toMatch(/3 kcal\/mol.*wildcards/);
    expect(crossingCaution([-12.34, 90]).message).toMatch(/-12\.3 degrees, 90\.0 degrees/);
  });

  it('name an internal hydrogen bond where a geometry closes one: O-H...O across four bonds', () => {
    // O0-C1-C2-C3-O4 with H5 on O0, other hydrogens left out as they play no part
    const molecule = createMolecule({
      atomicNumbers: [8, 6, 6, 6, 8, 1],
      bonds: [
        [0, 1, 1],
        [1, 2, 1],
        [2, 3, 1],
        [3, 4, 1],
        [0, 5, 1],
      ],
    });
    const closed = Float64Array.of(0, 0, 0, 0.5, 1.3, 0, 1.9, 1.5, 0, 2.8, 0.4, 0.4, 2.65, -0.1, 0.3, 0.95, -0.1, 0.05);
    const open = closed.slice();
    open.set([-0.9, -0.3, 0], 15);
    expect(hydrogenBondCaution(molecule, [open, closed])?.code).toBe('caution/hydrogen-bond');
    expect(hydrogenBondCaution(molecule, [closed])?.message).toMatch(/overbind.*distance-dependent dielectric \(--dielectric distance:1\)/);
    for (const dielectric of [
      { model: 'distance', constant: 1 },
      { model: 'constant', constant: 4 },
    ])
      expect(hydrogenBondCaution(molecule, [closed], dielectric)?.message).toMatch(/dielectric of this scan weakens it/);
    expect(hydrogenBondCaution(molecule, [closed], { model: 'constant', constant: 1 })?.message).toMatch(/overbind/);
    expect(hydrogenBondCaution(molecule, [open])).toBeNull();
    // the same contact inside a C-H is none
    const carbon = createMolecule({ atomicNumbers: [6, 6, 6, 6, 8, 1], bonds: [[0, 1, 1], [1, 2, 1], [2, 3, 1], [3, 4, 1], [0, 5, 1]] }); // biome-ignore format: bonds
    expect(hydrogenBondCaution(carbon, [closed])).toBeNull();
  });
});

describe('nitrogen pyramids', () => {
  const molecule = createMolecule({ atomicNumbers: [7, 6, 1, 1], bonds: [[0, 1, 1], [0, 2, 1], [0, 3, 1]] }); // biome-ignore format: bonds
  const pyramid = (height: number): Float64Array =>
    Float64Array.from([0, 0, height, ...[0, 120, 240].flatMap((k) => [Math.cos(radians(k)), Math.sin(radians(k)), 0])]);

  it('have a signed height, and invert when it changes sign on the way', () => {
    expect(pyramidHeight(pyramid(0.4), 0, [1, 2, 3])).toBeCloseTo(0.4, 12);
    expect(invertingNitrogens(molecule, [0, 1], [pyramid(0.4), pyramid(0), pyramid(-0.4)])).toEqual([0]);
    expect(invertingNitrogens(molecule, [0, 1], [pyramid(0.4), pyramid(0.3), pyramid(-0.02)])).toEqual([]);
  });
});

describe('isometries', () => {
  it('tell a structure from its mirror image, and count relabellings', () => {
    // four different atoms on a tetrahedron, and the same mirrored
    const x = Float64Array.of(0, 0, 0, 0.6, 0.6, 0.6, -0.6, -0.6, 0.6, -0.6, 0.6, -0.6, 0.6, -0.6, -0.6);
    const mirror = x.map((value, n) => (n % 3 === 2 ? -value : value));
    expect(isometries(x, x, [6, 1, 9, 17, 35])).toEqual([expect.objectContaining({ proper: true, improper: false })]);
    expect(isometries(x, mirror, [6, 1, 9, 17, 35])).toEqual([expect.objectContaining({ proper: false, improper: true })]);
    expect(isometries(x, x, [6, 1, 1, 1, 1])).toHaveLength(24);
    expect(isometries(x, x, [6, 1, 1, 1, 1], { limit: 5 })).toHaveLength(5);
    expect(isometries(x, x.map((value) => 1.5 * value), [6, 1, 1, 1, 1])).toEqual([]); // biome-ignore format: one line
    expect(() => isometries(x, x, [6])).toThrow(/for 1 kinds/);
  });
});
