/** A first-order saddle and the two minima that its paths down end in. */

import { wrapDegrees } from '@tordial/geometry';
import { mirrored } from '../branches.js';
import type { Calculation } from '../potential.js';
import { type Motion, motionOf, turningMotion } from './motion.js';
import { pathDown } from './path-down.js';
import { dot, projectedModes, rigidMotions } from './projected-modes.js';
import { angleOf, LEFT, minimumNear, type Proof, type ProvedPoint, TAKES_PART } from './proof-task.js';
import type { StationaryStructure } from './saddle.js';
import type { Minimum } from './same-minimum.js';

/** Bottom of a path down. */
export interface Bottom extends Minimum {
  readonly angle: number;
}

/** A first-order saddle with the bottoms of both paths, that towards smaller angles first. */
export interface Link {
  readonly structure: StationaryStructure;
  readonly overlap: number;
  readonly motion: Motion;
  readonly bottoms: readonly [Bottom, Bottom];
}

/** The mode of the lowest eigenvalue, mass-weighted. */
export function softest({ masses }: Proof, { hessian, coordinates }: StationaryStructure): Float64Array {
  return projectedModes(hessian, rigidMotions(coordinates, masses), masses).vectors[0];
}

export function motionAt(
  work: Proof,
  { coordinates: x }: StationaryStructure,
  mode: Float64Array,
): { motion: Motion; overlap: number; turning: number } {
  const {
    molecule,
    masses,
    rotor: {
      sides,
      torsion: [, a, b],
    },
  } = work;
  const turning = dot(mode, turningMotion(x, a, b, sides.b, masses));
  return { motion: motionOf(molecule, [a, b], sides.b, x, mode, masses), overlap: Math.min(1, Math.abs(turning)), turning };
}

/** Follows both paths down from a first-order saddle. */
export function* linkAt(work: Proof, structure: StationaryStructure): Calculation<Link | null> {
  if (!structure.converged || structure.order !== 1) return null;
  const mode = softest(work, structure);
  const { motion, overlap, turning } = motionAt(work, structure, mode);
  const bottoms: Bottom[] = [];
  for (const sign of turning > 0 ? [-1, 1] : [1, -1]) {
    const direction = mode.map((value) => sign * value);
    const path = yield* pathDown(structure.coordinates, structure.energy, structure.hessian, direction, work.masses);
    work.evaluations += path.evaluations;
    const { coordinates, energy } = yield* minimumNear(work, path.coordinates);
    bottoms.push({ coordinates, energy, angle: angleOf(work, coordinates) });
  }
  return { structure, motion, overlap, bottoms: [bottoms[0], bottoms[1]] };
}

/**
 * Whether a path's bottom is a well: the same minimum at the same angle, or one beside it that differs only by the mirror image or by an exchange of
 * equivalent atoms, such as the other gauche arrangement of a group that the rotor's position does not depend on.
 */
export function isAt(work: Proof, p: Bottom, q: Bottom): boolean {
  const apart = Math.abs(wrapDegrees(p.angle - q.angle));
  if (apart >= LEFT) return false;
  if (work.same(p, q)) return true;
  return work.same(p, { energy: q.energy, coordinates: mirrored(q.coordinates) });
}

/** Degrees from a well within which another conformer of the other rotors still stands on its side of the barrier. */
const BASIN = 30;

/**
 * Whether a saddle of this rotor leads from one well's side to the other's, though its paths end in other conformers there. That these and the wells
 * interconvert faster than the rotor turns is then an assumption, which is told.
 */
export function crossesOver({ bottoms: [p, q], overlap }: Link, beside: readonly ProvedPoint[]): boolean {
  if (overlap < TAKES_PART || beside.length === 0 || beside[0] === beside[1]) return false;
  const near = (bottom: Bottom, well: ProvedPoint): boolean => Math.abs(wrapDegrees(bottom.angle - well.angle)) < BASIN;
  return (near(p, beside[0]) && near(q, beside[1])) || (near(q, beside[0]) && near(p, beside[1]));
}
