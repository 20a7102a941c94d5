/** Inversion at nitrogen told apart from rotation: the sense of each pyramid along a path. */
import { type Coordinates, type Molecule, neighboursOf } from '@tordial/geometry';

/** A nitrogen nearer than this to the plane of its neighbours, angstrom, has no sense. */
const FLAT = 0.1;

/** Signed height (angstrom) of a three-coordinate atom over the plane of its neighbours in ascending order. */
export function pyramidHeight(x: Coordinates, atom: number, [p, q, r]: ArrayLike<number> & Iterable<number>): number {
  const [ux, uy, uz] = [0, 1, 2].map((k) => x[3 * q + k] - x[3 * p + k]);
  const [vx, vy, vz] = [0, 1, 2].map((k) => x[3 * r + k] - x[3 * p + k]);
  const [wx, wy, wz] = [0, 1, 2].map((k) => x[3 * atom + k] - x[3 * p + k]);
  const nx = uy * vz - uz * vy;
  const ny = uz * vx - ux * vz;
  const nz = ux * vy - uy * vx;
  return (nx * wx + ny * wy + nz * wz) / Math.hypot(nx, ny, nz);
}

/**
 * Nitrogens on or beside the axis (three single-bonded neighbours) that are pyramidal with one sense in some of the geometries (3 values an atom,
 * angstrom) and with the other in others.
 */
export function invertingNitrogens(
  molecule: Pick<Molecule, 'atomicNumbers' | 'neighbours'>,
  axis: readonly [number, number],
  geometries: readonly Coordinates[],
): number[] {
  const near = new Set(axis.flatMap((i) => [i, ...neighboursOf(molecule, i)]));
  return [...near]
    .filter((i) => molecule.atomicNumbers[i] === 7 && neighboursOf(molecule, i).length === 3)
    .filter((i) => {
      const heights = geometries.map((x) => pyramidHeight(x, i, neighboursOf(molecule, i)));
      return heights.some((height) => height > FLAT) && heights.some((height) => height < -FLAT);
    })
    .sort((a, b) => a - b);
}
