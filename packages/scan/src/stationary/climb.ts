/** Where to look for a saddle: the tops that turning a rotor or inverting a nitrogen leads over. */

import { type Coordinates, degrees, neighboursOf, radians, superpose, TordialError, torsion as torsionAngle } from '@tordial/geometry';
import { type DrivenRotor, drivenRotor } from '../driven-rotor.js';
import { modelHessian } from '../model-hessian.js';
import type { Calculation } from '../potential.js';
import { relaxationAt } from '../relax-at.js';
import { findRotors } from '../rotors/rotor.js';
import { invertedBetween, invertingMotion, turningMotion } from './motion.js';
import { dot, length, removeAlong, rigidMotions } from './projected-modes.js';
import { type Candidates, type Proof, SAME_ANGLE } from './proof-task.js';
import type { Bottom } from './saddle-link.js';

interface Start {
  readonly x: Coordinates;
  /** Direction to climb; the softest mode when null. */
  readonly follow: Float64Array | null;
}

/** kcal/mol that a followed branch may fall short of the trapezoidal rule before it has been left. */
const LEAP = 0.3;

/** Where the climb by turning a rotor leads; null where an angle within its torsion opens on the way. */
export function* over(
  work: Proof,
  rotor: DrivenRotor,
  from: Coordinates,
  direction: 1 | -1,
  step: number,
  farthest: number,
): Calculation<Start | null> {
  try {
    return yield* climbed(work, rotor, from, direction, step, farthest);
  } catch (error) {
    if (error instanceof TordialError && error.code === 'scan/linear') return null;
    throw error;
  }
}

/** Turns a rotor step by step, all else relaxed, until it tops out or falls on another branch: where a saddle may be looked for. */
function* climbed(
  work: Proof,
  rotor: DrivenRotor,
  from: Coordinates,
  direction: 1 | -1,
  step: number,
  farthest: number,
): Calculation<Start | null> {
  const { sides, torsion } = rotor;
  const held = modelHessian(work.molecule, torsion);
  const begin = torsionAngle(from, ...torsion);
  let at = yield* relaxationAt(rotor, held, begin, from);
  work.evaluations += at.evaluations;
  for (let turned = step; turned <= farthest; turned += step) {
    const next = yield* relaxationAt(rotor, held, begin + direction * radians(turned), at.coordinates);
    work.evaluations += next.evaluations;
    const trapezoid = (direction * radians(step) * (at.torque + next.torque)) / 2;
    if (Math.abs(next.energy - at.energy - trapezoid) > LEAP) return { x: at.coordinates, follow: null };
    // a shallow minimum is left within the first step
    if (direction * next.torque <= 0 && (direction * at.torque > 0 || turned === step)) {
      const top = next.energy > at.energy ? next : at;
      return { x: top.coordinates, follow: turningMotion(top.coordinates, torsion[1], torsion[2], sides.b) };
    }
    at = next;
  }
  return null;
}

/** Degrees by which another rotor must differ between two minima to be turned, and the steps it is turned in. */
const TURNED = 25;

const TURN_STEP = 5;

/** Where to climb from a minimum towards another: over a nitrogen that inverts, or over the turn of the rotor that differs most, either way round. */
export function* startsTowards(work: Proof, from: Bottom, to: Bottom): Calculation<Start[]> {
  const { molecule, rotor } = work;
  const [, a, b] = rotor.torsion;
  const starts: Start[] = invertedBetween(molecule, from.coordinates, to.coordinates).map((atom) => {
    const around = neighboursOf(molecule, atom);
    const x = flattened(from.coordinates, atom, around);
    return { x, follow: invertingMotion(x, atom, around) };
  });
  const differing = findRotors(molecule)
    .map((other) => {
      const far = other.sides[0].includes(a) && other.sides[0].includes(b) ? 1 : 0;
      const own = other.axis.includes(a) && other.axis.includes(b);
      const period = own ? 360 : 360 / other.symmetryNumbers[far];
      const turn = degrees(torsionAngle(to.coordinates, ...other.torsion) - torsionAngle(from.coordinates, ...other.torsion));
      return { other, own, period, turn: turn - period * Math.round(turn / period) };
    })
    .filter(({ own, turn }) => Math.abs(turn) > (own ? SAME_ANGLE : TURNED))
    .sort((p, q) => Math.abs(q.turn) - Math.abs(p.turn));
  for (const { other, turn, period } of differing)
    for (const direction of turn > 0 ? ([1, -1] as const) : ([-1, 1] as const)) {
      const start: Start | null = yield* over(work, drivenRotor(molecule, other.torsion), from.coordinates, direction, TURN_STEP, period);
      if (start) starts.push(start);
    }
  return starts;
}

/** A three-coordinate atom moved into the plane of its neighbours. */
function flattened(x: Coordinates, atom: number, [p, q, r]: Int32Array): Coordinates {
  const flat = x.slice();
  const u = [0, 1, 2].map((k) => x[3 * q + k] - x[3 * p + k]);
  const v = [0, 1, 2].map((k) => x[3 * r + k] - x[3 * p + k]);
  const n = [0, 1, 2].map((k) => u[(k + 1) % 3] * v[(k + 2) % 3] - u[(k + 2) % 3] * v[(k + 1) % 3]);
  const height = [0, 1, 2].reduce((sum, k) => sum + n[k] * (x[3 * atom + k] - x[3 * p + k]), 0) / dot(n, n);
  for (let k = 0; k < 3; k++) flat[3 * atom + k] -= height * n[k];
  return flat;
}

export function pointsBeside({ points }: Candidates, angle: number): readonly [Candidates['points'][number], Candidates['points'][number]] {
  const behind = (point: { readonly angle: number }): number => (angle - point.angle + 720) % 360;
  const left = points.reduce((p, q) => (behind(q) < behind(p) ? q : p));
  return [left, points[(points.indexOf(left) + 1) % points.length]];
}

/** The geometry halfway between both branches at the crossing, to be climbed along their difference. */
export function* halfway(
  work: Proof,
  left: Candidates['points'][number],
  right: Candidates['points'][number],
  angle: number,
): Calculation<Start | null> {
  const { rotor, molecule } = work;
  const held = modelHessian(molecule, rotor.torsion);
  const ends: Coordinates[] = [];
  for (const { coordinates } of [left, right]) {
    const relaxed = yield* relaxationAt(rotor, held, radians(angle), coordinates);
    work.evaluations += relaxed.evaluations;
    ends.push(relaxed.coordinates);
  }
  const other = superpose(ends[1], ends[0]).coordinates;
  const follow = other.map((value, k) => value - ends[0][k]);
  for (const motion of rigidMotions(ends[0])) removeAlong(follow, motion);
  const size = length(follow);
  if (!(size > 1e-3)) return null;
  const middle = ends[0].map((value, k) => (value + other[k]) / 2);
  return { x: middle, follow: follow.map((value) => value / size) };
}
