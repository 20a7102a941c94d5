/** The wells, barriers and crossings of a profile, with geometries and energies of their own instead of interpolated ones. */
import { type Coordinates, degrees, radians, wrapDegrees } from '@tordial/geometry';
import type { Calculation } from './potential.js';
import type { CurveExtremum, ProfileCurve } from './profile-curve.js';

export interface StationaryPoint {
  /**
   * `well` and `barrier` are extrema along the scan, where the torque vanishes; a `crossing` is a maximum of the envelope where two branches
   * meet: an upper bound to the way from one to the other, and no saddle.
   */
  readonly kind: CurveExtremum['kind'];
  /** Degrees in [-180, 180). */
  readonly angle: number;
  /** kcal/mol. */
  readonly energy: number;
  /** dE/dphi left over, kcal/mol/radian; that of the lower branch's side for a crossing. */
  readonly torque: number;
  readonly converged: boolean;
  /** Angstrom, in the rotor's frame. */
  readonly coordinates: Coordinates;
}

/** A geometry held at an angle (degrees). */
interface Held {
  readonly angle: number;
  readonly energy: number;
  readonly torque: number;
  readonly converged: boolean;
  readonly coordinates: Coordinates;
}

/** Calculates the geometry held at an angle (degrees) that `start` leads to. */
export type HoldAt = (angle: number, start: Coordinates) => Calculation<Held>;

/** The torque (kcal/mol/radian) that counts as none, and the difference of energies (kcal/mol) at which two branches meet. */
const NO_TORQUE = 2e-3;
const MEET = 1e-3;
const MOST_STEPS = 8;

/**
 * Refines each extremum of the curve: wells and barriers by the secant method on the torque, crossings by Newton steps on the difference of the two
 * branches' energies. Ascending by angle. With `mirror`, the profile is symmetric and only half of it is calculated.
 */
export function* refinedExtrema(
  curve: ProfileCurve,
  points: readonly Held[],
  holdAt: HoldAt,
  mirror: ((x: Coordinates) => Coordinates) | null,
): Calculation<StationaryPoint[]> {
  const refined: StationaryPoint[] = [];
  for (const extremum of curve.extrema) {
    const onMirror = Math.abs(extremum.angle) < 1e-3 || Math.abs(Math.abs(extremum.angle) - 180) < 1e-3;
    if (mirror && !onMirror && extremum.angle < 0) continue;
    const point =
      extremum.kind === 'crossing' ? yield* meeting(curve, extremum, points, holdAt) : yield* balanced(curve, extremum, points, holdAt);
    refined.push(point);
    if (mirror && !onMirror)
      refined.push({ ...point, angle: wrapDegrees(-point.angle), torque: -point.torque, coordinates: mirror(point.coordinates) });
  }
  return refined.sort((p, q) => p.angle - q.angle);
}

/** Finds the angle near an extremum at which the torque vanishes. */
function* balanced(curve: ProfileCurve, extremum: CurveExtremum, points: readonly Held[], holdAt: HoldAt): Calculation<StationaryPoint> {
  const { kind, point, fraction, side, curvature } = extremum;
  const left = points[point];
  const right = points[(point + 1) % points.length];
  const width = intervalOf(curve, point);
  if (fraction === 0 && side !== 'right' && Math.abs(left.torque) <= NO_TORQUE) return stationary(kind, left);

  // angles count from the left point, so that the interval does not break at 180 degrees
  const start = side === 'left' || (side === 'both' && fraction < 0.5) ? left : right;
  let at = fraction * width;
  let slope = curvature;
  let best: Held | null = null;
  let low = 0;
  let high = width;
  let previous: { at: number; torque: number } | null = null;
  for (let n = 0; n < MOST_STEPS; n++) {
    const held: Held = yield* holdAt(wrapDegrees(left.angle + degrees(at)), best ? best.coordinates : start.coordinates);
    if (!best || Math.abs(held.torque) < Math.abs(best.torque)) best = held;
    if (Math.abs(held.torque) <= NO_TORQUE) break;
    if (held.torque > 0 === curvature > 0) high = at;
    else low = at;
    if (previous && at !== previous.at) {
      const secant = (held.torque - previous.torque) / (at - previous.at);
      if (secant * curvature > 0) slope = secant;
    }
    previous = { at, torque: held.torque };
    const step = at - held.torque / slope;
    at = step > low && step < high ? step : (low + high) / 2;
    if (high - low < radians(1e-4)) break;
  }
  return stationary(kind, best ?? start);
}

/** Finds the angle at which the branches of both sides have the same energy. */
function* meeting(curve: ProfileCurve, extremum: CurveExtremum, points: readonly Held[], holdAt: HoldAt): Calculation<StationaryPoint> {
  const { point, fraction } = extremum;
  const left = points[point];
  const right = points[(point + 1) % points.length];
  if (fraction === 0 && curve.points[point].torqueAfter !== undefined) return stationary('crossing', left);
  const width = intervalOf(curve, point);
  let at = fraction * width;
  let fromLeft: Held = left;
  let fromRight: Held = right;
  for (let n = 0; n < MOST_STEPS; n++) {
    const angle = wrapDegrees(left.angle + degrees(at));
    fromLeft = yield* holdAt(angle, fromLeft.coordinates);
    fromRight = yield* holdAt(angle, fromRight.coordinates);
    const difference = fromLeft.energy - fromRight.energy;
    const bend = fromLeft.torque - fromRight.torque;
    if (Math.abs(difference) < MEET || !(bend > 0)) break;
    at = Math.min(Math.max(at - difference / bend, 0), width);
  }
  return stationary('crossing', fromLeft.energy <= fromRight.energy ? fromLeft : fromRight);
}

function stationary(kind: StationaryPoint['kind'], { angle, energy, torque, converged, coordinates }: Held): StationaryPoint {
  return { kind, angle, energy, torque, converged, coordinates };
}

function intervalOf({ points }: ProfileCurve, n: number): number {
  return radians(n + 1 < points.length ? points[n + 1].angle - points[n].angle : points[0].angle + 360 - points[n].angle);
}
