import { describe, expect, it } from 'vitest';
import { leastRmsd, rmsd, superpose } from './superpose.js';

const points = (count: number, seed: number) =>
  Float64Array.from({ length: 3 * count }, (_, n) => 4 * Math.sin(seed + 12.9898 * n * n + n));

const cube = Float64Array.from([1, -1].flatMap((p) => [1, -1].flatMap((q) => [1, -1].flatMap((r) => [p, q, r]))));

/** Right-hand turn by `angle` about the unit axis, then a shift. */
function moved(x: Float64Array, axis: readonly number[], angle: number, shift: readonly number[]): Float64Array {
  const length = Math.hypot(...axis);
  const u = axis.map((value) => value / length);
  const out = new Float64Array(x.length);
  for (let at = 0; at < x.length; at += 3) {
    const along = u[0] * x[at] + u[1] * x[at + 1] + u[2] * x[at + 2];
    for (let k = 0; k < 3; k++) {
      const [p, q] = [(k + 1) % 3, (k + 2) % 3];
      out[at + k] =
        Math.cos(angle) * x[at + k] +
        Math.sin(angle) * (u[p] * x[at + q] - u[q] * x[at + p]) +
        (1 - Math.cos(angle)) * along * u[k] +
        shift[k];
    }
  }
  return out;
}

describe('superposition', () => {
  it.each([0, 1e-6, 0.7, 2, Math.PI])('undoes a turn by %d and a shift', (angle) => {
    const reference = points(9, 1);
    const moving = moved(reference, [1, -2, 0.5], angle, [3, 4, -5]);
    const { coordinates, rmsd: left, rotation: r } = superpose(moving, reference);
    expect(left).toBeLessThan(1e-12);
    for (let n = 0; n < 27; n++) expect(coordinates[n]).toBeCloseTo(reference[n], 11);
    const determinant = r[0] * (r[4] * r[8] - r[5] * r[7]) - r[1] * (r[3] * r[8] - r[5] * r[6]) + r[2] * (r[3] * r[7] - r[4] * r[6]);
    expect(determinant).toBeCloseTo(1, 12);
  });
  it('holds for planar, linear and single-atom sets', () => {
    const planar = points(6, 2).map((value, n) => (n % 3 === 2 ? 0 : value));
    const linear = Float64Array.of(0, 0, 0, 0, 0, 1.2, 0, 0, 2.3);
    for (const reference of [planar, linear, Float64Array.of(1, 2, 3)])
      expect(superpose(moved(reference, [1, 1, 0.2], 1.1, [1, 2, 3]), reference).rmsd).toBeLessThan(1e-12);
  });
  it('never turns into the mirror image', () => {
    const reference = points(8, 3);
    const mirror = reference.map((value, n) => (n % 3 === 0 ? -value : value));
    expect(superpose(mirror, reference).rmsd).toBeGreaterThan(0.5);
  });
  it('of three atoms on a line against a stretched copy leaves the hand-computed distance', () => {
    // positions -1, 0, 1 against -2, 0, 2: best as they stand, rmsd sqrt((1 + 0 + 1) / 3)
    const x = Float64Array.of(-1, 0, 0, 0, 0, 0, 1, 0, 0);
    const stretched = moved(
      x.map((value) => 2 * value),
      [0, 1, 1],
      0.4,
      [0, 0, 1],
    );
    expect(superpose(stretched, x).rmsd).toBeCloseTo(Math.sqrt(2 / 3), 12);
    expect(leastRmsd(stretched, x)).toBeCloseTo(Math.sqrt(2 / 3), 10);
  });
  it('beats every small rotation and shift about its result', () => {
    const reference = points(7, 4);
    const { coordinates, rmsd: best } = superpose(points(7, 5), reference);
    expect(leastRmsd(points(7, 5), reference)).toBeCloseTo(best, 8);
    expect(rmsd(coordinates, reference)).toBeCloseTo(best, 14);
    for (const axis of [
      [1, 0, 0],
      [0, 1, 0],
      [0, 0, 1],
      [1, 1, 1],
    ])
      for (const angle of [-0.5, -0.01, 0.01, 0.5, 3])
        expect(rmsd(moved(coordinates, axis, angle, [0, 0, 0]), reference)).toBeGreaterThan(best);
    for (const shift of [
      [0.01, 0, 0],
      [0, -0.01, 0],
      [0, 0, 0.01],
    ])
      expect(rmsd(moved(coordinates, [1, 0, 0], 0, shift), reference)).toBeGreaterThan(best);
  });
  it('finds the least distance from the eigenvalue alone, also where the largest one is double', () => {
    const planar = points(6, 2).map((value, n) => (n % 3 === 2 ? 0 : value));
    const linear = Float64Array.of(0, 0, 0, 0, 0, 1.2, 0, 0, 2.3);
    for (let seed = 10; seed < 40; seed++)
      for (const [p, q] of [
        [points(5, seed), points(5, seed + 50)],
        [planar, points(6, seed)],
        [planar, moved(planar, [1, seed, 2], seed, [0, 1, 0])],
        [linear, points(3, seed)],
        [linear, moved(linear, [1, seed, 2], seed, [0, 1, 0])],
        [points(5, seed).map((value, n) => (n % 3 === 0 ? -value : value)), points(5, seed)],
        // a cube against its mirror image: all turns equally good
        [cube.map((value) => value * seed), cube],
      ])
        expect(Math.abs(leastRmsd(p, q) - superpose(p, q).rmsd)).toBeLessThan(1e-6);
    expect(leastRmsd(Float64Array.of(1, 2, 3), Float64Array.of(4, 5, 6))).toBe(0);
  });
  it('counts chosen atoms, weights and relabelled partners only', () => {
    const reference = points(6, 6);
    const moving = moved(reference, [0, 1, 2], 1, [1, 1, 1]);
    moving[15] += 2;
    expect(superpose(moving, reference).rmsd).toBeGreaterThan(0.3);
    expect(superpose(moving, reference, { atoms: [0, 1, 2, 3, 4] }).rmsd).toBeLessThan(1e-12);
    expect(superpose(moving, reference, { weights: [1, 2, 1, 3, 1, 0] }).rmsd).toBeLessThan(1e-12);
    const image = [2, 0, 1, 3, 4, 5];
    const relabelled = new Float64Array(18);
    for (let i = 0; i < 6; i++) relabelled.set(reference.slice(3 * i, 3 * i + 3), 3 * image[i]);
    expect(superpose(relabelled, reference, { image }).rmsd).toBeLessThan(1e-12);
  });
  it('refuses sizes that differ, absent atoms and weights that vanish', () => {
    const x = points(3, 7);
    for (const attempt of [
      () => superpose(x, points(4, 7)),
      () => superpose(x, x, { atoms: [0, 3] }),
      () => rmsd(x, x, { weights: [0, 0, 0] }),
      () => rmsd(x, x, { weights: [1, -1, 1] }),
      () => leastRmsd(x, x, { atoms: [] }),
    ])
      expect(attempt).toThrow(expect.objectContaining({ code: 'geometry/superposition' }));
  });
});
