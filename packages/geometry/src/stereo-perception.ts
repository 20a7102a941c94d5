/** Configuration of stereocentres, double bonds and axes as three-dimensional coordinates show it. */
import type { Coordinates, Molecule, StereoTable } from './molecule.js';

/** Below this volume of unit vectors a centre counts as flat and its configuration as not shown (0.77 for a regular tetrahedron). */
const FLAT_VOLUME = 0.15;

/** Within this cosine of 90 degrees a double bond counts as neither cis nor trans, within this sine of 0 or 180 an axis as neither sense. */
const UNDECIDED = 0.17;

/**
 * The molecule's own stereo table with every sign read from coordinates (angstrom, 3 per atom): 0 or null where an element is too flat or
 * too twisted to tell. Comparing the result with `molecule.stereo` tells whether a geometry has the configuration that is asked for.
 */
export function perceiveStereo(molecule: Pick<Molecule, 'stereo'>, coordinates: Coordinates): StereoTable {
  const { tetrahedral, doubleBonds, axes } = molecule.stereo;
  return {
    tetrahedral: tetrahedral.map((centre) => ({ ...centre, sign: handedness(coordinates, centre.atom, centre.neighbours) })),
    doubleBonds: doubleBonds.map((bond) => {
      const { cosine } = torsionParts(coordinates, bond.substituentA, bond.a, bond.b, bond.substituentB);
      return { ...bond, cis: Math.abs(cosine) < UNDECIDED ? null : cosine > 0 };
    }),
    axes: axes.map((axis) => {
      const { sine } = torsionParts(coordinates, axis.substituentA, axis.a, axis.b, axis.substituentB);
      return { ...axis, sign: Math.abs(sine) < UNDECIDED ? 0 : sine > 0 ? 1 : -1 };
    }),
  };
}

function handedness(x: Coordinates, centre: number, neighbours: readonly number[]): -1 | 0 | 1 {
  return tripleSign(neighbours.filter((j) => j >= 0).map((j) => direction(x, centre, j)));
}

/**
 * Sign of the triple product of the first three of three or four bond directions (unit vectors); with four, the mean of the four
 * equivalent volumes decides. 0 where its size is below `flat`.
 */
export function tripleSign(unit: readonly Vector[], flat = FLAT_VOLUME): -1 | 0 | 1 {
  const volumes = [triple(unit[0], unit[1], unit[2])];
  if (unit.length === 4)
    volumes.push(-triple(unit[1], unit[2], unit[3]), triple(unit[2], unit[3], unit[0]), -triple(unit[3], unit[0], unit[1]));
  const mean = volumes.reduce((sum, volume) => sum + volume, 0) / volumes.length;
  return Math.abs(mean) < flat ? 0 : mean > 0 ? 1 : -1;
}

type Vector = readonly [number, number, number];

function direction(x: Coordinates, i: number, j: number): Vector {
  const d: Vector = [x[3 * j] - x[3 * i], x[3 * j + 1] - x[3 * i + 1], x[3 * j + 2] - x[3 * i + 2]];
  const length = Math.hypot(...d) || 1;
  return [d[0] / length, d[1] / length, d[2] / length];
}

function cross(u: Vector, v: Vector): Vector {
  return [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
}

const dot = (u: Vector, v: Vector): number => u[0] * v[0] + u[1] * v[1] + u[2] * v[2];
const triple = (u: Vector, v: Vector, w: Vector): number => dot(u, cross(v, w));

/** Cosine and sine of the torsion i-j-k-l, where j and k need not be bonded. */
function torsionParts(x: Coordinates, i: number, j: number, k: number, l: number): { cosine: number; sine: number } {
  const axis = direction(x, j, k);
  const m = cross(direction(x, j, i), axis);
  const n = cross(direction(x, k, l), axis);
  const norm = Math.hypot(...m) * Math.hypot(...n) || 1;
  return { cosine: dot(m, n) / norm, sine: dot(axis, cross(m, n)) / norm };
}
