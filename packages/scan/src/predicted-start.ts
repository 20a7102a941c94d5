/** Where to start the relaxation of the next point of a scan. */
import type { Coordinates } from '@tordial/geometry';
import { type Direction, type HeldMinimum, joined, next } from './branches.js';
import { type DrivenRotor, rotorAngle, turnSide } from './driven-rotor.js';

/** Coefficients of the polynomial through 1, 2, 3 ... equally spaced points, continued by one step; newest point first. */
const CONTINUE = [[1], [2, -1], [3, -3, 1], [4, -6, 4, -1], [5, -10, 10, -5, 1]];
/** Farther than this (angstrom) between two points of a branch is a jump (of equivalent atoms, say): nothing to extrapolate from. */
const JUMP = 0.5;

/**
 * The geometry expected at `angle` (radian), one step from `from` in a direction: the rotor's turn is taken back from the last points of the
 * branch, what is left of their change is extrapolated, and the turn is put on again. The order is that which would have predicted `from` best.
 */
export function predictedStart(rotor: DrivenRotor, from: HeldMinimum, direction: Direction, angle: number): Coordinates {
  const history = unturnedHistory(rotor, from, direction);
  let best = 0;
  let least = Number.POSITIVE_INFINITY;
  for (let order = 0; order < CONTINUE.length && order + 1 < history.length; order++) {
    const error = mismatch(CONTINUE[order], history);
    if (error < least) {
      least = error;
      best = order;
    }
  }
  const start = new Float64Array(from.coordinates.length);
  CONTINUE[best].forEach((weight, n) => {
    const point = history[n];
    for (let k = 0; k < start.length; k++) start[k] += weight * point[k];
  });
  turnSide(rotor, start, angle);
  return start;
}

/** The last points of the branch, newest first, with the rotor turned back to 0. */
function unturnedHistory(rotor: DrivenRotor, from: HeldMinimum, direction: Direction): Coordinates[] {
  const history: Coordinates[] = [];
  const back = -direction as Direction;
  let at: HeldMinimum = from;
  while (history.length <= CONTINUE.length) {
    const point = at.coordinates.slice();
    turnSide(rotor, point, -rotorAngle(rotor, point));
    if (history.length > 0 && farthest(point, history[history.length - 1]) > JUMP) break;
    history.push(point);
    const earlier = next(at, back);
    if (!earlier || !joined(at, back, earlier)) break;
    at = earlier;
  }
  return history;
}

function farthest(p: Coordinates, q: Coordinates): number {
  let most = 0;
  for (let k = 0; k < p.length; k++) most = Math.max(most, Math.abs(p[k] - q[k]));
  return most;
}

/** Squared error of the newest point as it would have been extrapolated from those before it. */
function mismatch(weights: readonly number[], history: readonly Coordinates[]): number {
  let sum = 0;
  for (let k = 0; k < history[0].length; k++) {
    let value = -history[0][k];
    for (let n = 0; n < weights.length; n++) value += weights[n] * history[n + 1][k];
    sum += value * value;
  }
  return sum;
}
