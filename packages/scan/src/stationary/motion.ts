/** What a mode of a molecule is: the turn of a rotor, a nitrogen turning inside out, or something else. */
import { type Coordinates, type Molecule, neighboursOf } from '@tordial/geometry';
import { findRotors } from '../rotors/rotor.js';
import { dot, length, removeAlong, rigidMotions } from './projected-modes.js';

/** The motion that a mode resembles most. */
export interface Motion {
  /** `rotor`: the rotor of the profile; `other rotor`: another bond that turns; `inversion`: a nitrogen through the plane of its neighbours. */
  readonly kind: 'rotor' | 'other rotor' | 'inversion' | 'other';
  /** The axis that turns or the atom that inverts. */
  readonly atoms: readonly number[];
  /** Cosine (0 to 1) between the mode and that motion, both mass-weighted and free of translation and rotation. */
  readonly overlap: number;
}

/** An overlap below this with every motion known says nothing. */
const ALIKE = 0.4;

/**
 * dx/dphi of turning the atoms of side b rigidly about the axis a-b, angstrom/radian, as a displacement of unit length in weighted coordinates
 * free of translation and rotation. `weights`: masses, or 1 when left out.
 */
export function turningMotion(x: Coordinates, a: number, b: number, sideB: ArrayLike<number>, weights?: ArrayLike<number>): Float64Array {
  const motion = new Float64Array(x.length);
  const u = [0, 1, 2].map((k) => x[3 * b + k] - x[3 * a + k]);
  const size = Math.hypot(u[0], u[1], u[2]);
  for (let n = 0; n < sideB.length; n++) {
    const at = 3 * sideB[n];
    const r = [0, 1, 2].map((k) => x[at + k] - x[3 * b + k]);
    const root = weights ? Math.sqrt(weights[sideB[n]]) : 1;
    for (let k = 0; k < 3; k++) motion[at + k] = (root * (u[(k + 1) % 3] * r[(k + 2) % 3] - u[(k + 2) % 3] * r[(k + 1) % 3])) / size;
  }
  return internalPart(motion, x, weights);
}

/** A displacement freed of translation and rotation, of unit length. */
function internalPart(motion: Float64Array, x: Coordinates, weights?: ArrayLike<number>): Float64Array {
  for (const rigid of rigidMotions(x, weights)) removeAlong(motion, rigid);
  const size = length(motion);
  return size > 0 ? motion.map((value) => value / size) : motion;
}

/** A three-coordinate atom moved along the normal of its neighbours' plane, they the other way. */
export function invertingMotion(x: Coordinates, atom: number, [p, q, r]: Int32Array, weights?: ArrayLike<number>): Float64Array {
  const root = (i: number): number => (weights ? Math.sqrt(weights[i]) : 1);
  const u = [0, 1, 2].map((k) => x[3 * q + k] - x[3 * p + k]);
  const v = [0, 1, 2].map((k) => x[3 * r + k] - x[3 * p + k]);
  const normal = [0, 1, 2].map((k) => u[(k + 1) % 3] * v[(k + 2) % 3] - u[(k + 2) % 3] * v[(k + 1) % 3]);
  const motion = new Float64Array(x.length);
  for (let k = 0; k < 3; k++) {
    motion[3 * atom + k] = root(atom) * normal[k];
    for (const other of [p, q, r]) motion[3 * other + k] = (-root(other) * normal[k]) / 3;
  }
  return internalPart(motion, x, weights);
}

/** The motion that `mode` (mass-weighted, unit length) at x resembles most. `axis` and `sideB` are the profile's rotor. */
export function motionOf(
  molecule: Molecule,
  axis: readonly [number, number],
  sideB: ArrayLike<number>,
  x: Coordinates,
  mode: Float64Array,
  masses: ArrayLike<number>,
): Motion {
  const cosine = (motion: Float64Array): number => Math.min(1, Math.abs(dot(motion, mode)));
  const own: Motion = { kind: 'rotor', atoms: axis, overlap: cosine(turningMotion(x, axis[0], axis[1], sideB, masses)) };
  const others: Motion[] = [];
  for (const { axis: other, sides } of findRotors(molecule)) {
    if (other.includes(axis[0]) && other.includes(axis[1])) continue;
    others.push({ kind: 'other rotor', atoms: other, overlap: cosine(turningMotion(x, other[0], other[1], sides[1], masses)) });
  }
  for (let atom = 0; atom < molecule.atomCount; atom++) {
    const around = neighboursOf(molecule, atom);
    if (molecule.atomicNumbers[atom] !== 7 || around.length !== 3) continue;
    others.push({ kind: 'inversion', atoms: [atom], overlap: cosine(invertingMotion(x, atom, around, masses)) });
  }
  const best = others.reduce((p, q) => (q.overlap > p.overlap ? q : p), own);
  if (best.overlap < ALIKE) return { ...own, kind: 'other', atoms: [] };
  return best;
}

/** Nitrogens (three neighbours) that stand on one side of their neighbours' plane in x and on the other in y, by more than 0.1 angstrom each. */
export function invertedBetween(molecule: Molecule, x: Coordinates, y: Coordinates): number[] {
  const inverted: number[] = [];
  for (let atom = 0; atom < molecule.atomCount; atom++) {
    const around = neighboursOf(molecule, atom);
    if (molecule.atomicNumbers[atom] !== 7 || around.length !== 3) continue;
    const before = height(x, atom, around);
    const after = height(y, atom, around);
    if (Math.min(Math.abs(before), Math.abs(after)) > PLANAR && before * after < 0) inverted.push(atom);
  }
  return inverted;
}

/** A nitrogen nearer than this to the plane of its neighbours, angstrom, has no side. */
const PLANAR = 0.1;

function height(x: Coordinates, atom: number, [p, q, r]: Int32Array): number {
  const u = [0, 1, 2].map((k) => x[3 * q + k] - x[3 * p + k]);
  const v = [0, 1, 2].map((k) => x[3 * r + k] - x[3 * p + k]);
  const normal = [0, 1, 2].map((k) => u[(k + 1) % 3] * v[(k + 2) % 3] - u[(k + 2) % 3] * v[(k + 1) % 3]);
  const above = [0, 1, 2].map((k) => x[3 * atom + k] - x[3 * p + k]);
  return dot(normal, above) / Math.hypot(...normal);
}
