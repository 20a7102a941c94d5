/** The wells, barriers and crossings of a profile, with geometries and energies of their own instead of interpolated ones. */
import { type Coordinates, degrees, radians, wrapDegrees } from '@tordial/geometry';
import type { Calculation } from './potential.js';
import { allExtrema, alternating, type CurveExtremum, type ProfileCurve } from './profile-curve.js';

export interface StationaryPoint {
  /**
   * `well` and `barrier` are extrema along the scan, where the torque vanishes; a `crossing` is a maximum of the envelope where two branches
   * meet: no saddle, and the way from one to the other may lead well above it.
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

/** The torque (kcal/mol/radian) that counts as none, that which an extremum may be left with, and the difference of energies (kcal/mol) at which two branches meet. */
const NO_TORQUE = 2e-3;
const LITTLE_TORQUE = 2e-2;
const MEET = 1e-3;
const MOST_STEPS = 8;
/** Degrees to the maximum that makes a well a step of the envelope, and the height (kcal/mol) up to which it does. */
const NEAR = 20;
const STEP = 0.5;

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
  for (const extremum of allExtrema(curve)) {
    const onMirror = Math.abs(extremum.angle) < 1e-3 || Math.abs(Math.abs(extremum.angle) - 180) < 1e-3;
    if (mirror && !onMirror && extremum.angle < 0) continue;
    const interval = intervalOf(curve, extremum.point, points, mirror);
    const point = extremum.kind === 'crossing' ? yield* meeting(extremum, interval, holdAt) : yield* balanced(extremum, interval, holdAt);
    refined.push(onCurve(curve, point));
    if (mirror && !onMirror)
      refined.push(onCurve(curve, { ...point, angle: -point.angle, torque: -point.torque, coordinates: mirror(point.coordinates) }));
  }
  return alternating(
    refined.filter((point) => !isStep(point, refined)).sort((p, q) => p.angle - q.angle),
    curve.open,
  );
}

/**
 * Whether what looked like a well is a step of the envelope: no branch has its minimum there, and the maxima of the profile stand hardly above it.
 */
function isStep(point: StationaryPoint, all: readonly StationaryPoint[]): boolean {
  if (point.kind !== 'well' || Math.abs(point.torque) <= LITTLE_TORQUE) return false;
  const apart = (other: StationaryPoint): number => Math.abs(wrapDegrees(other.angle - point.angle));
  return all.some((other) => other.kind !== 'well' && apart(other) < NEAR && other.energy - point.energy < STEP);
}

/** A stationary point with its angle as the curve counts angles: within the turn, or within the range of an open one. */
function onCurve({ points, open }: ProfileCurve, point: StationaryPoint): StationaryPoint {
  if (!open) return { ...point, angle: wrapDegrees(point.angle) };
  const middle = (points[0].angle + points[points.length - 1].angle) / 2;
  return { ...point, angle: middle + wrapDegrees(point.angle - middle) };
}

/** Two neighbouring points as the branches between them begin and end there. */
interface Interval {
  readonly left: Held;
  readonly right: Held;
  /** Radian. */
  readonly width: number;
  /** A mirror image leads on from the left point, which is where the two branches meet. */
  readonly meetsAtLeft: boolean;
}

function intervalOf(
  { points: onCurve }: ProfileCurve,
  n: number,
  points: readonly Held[],
  mirror: ((x: Coordinates) => Coordinates) | null,
): Interval {
  const following = (n + 1) % points.length;
  const { angle, torqueAfter } = onCurve[n];
  const meetsAtLeft = torqueAfter !== undefined && mirror !== null;
  return {
    left: meetsAtLeft ? { ...points[n], torque: torqueAfter, coordinates: mirror(points[n].coordinates) } : points[n],
    right: points[following],
    width: radians(onCurve[following].angle + (following === 0 ? 360 : 0) - angle),
    meetsAtLeft,
  };
}

/**
 * Finds the angle near an extremum at which the torque vanishes. A maximum whose branch gives way before that is a crossing; a well that
 * is not found so is marked as not converged.
 */
function* balanced(extremum: CurveExtremum, { left, right, width }: Interval, holdAt: HoldAt): Calculation<StationaryPoint> {
  const { kind, fraction, side, curvature } = extremum;
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
    if (Math.abs(held.torque) <= NO_TORQUE) return stationary(kind, held);
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
  const found = stationary(kind, best ?? start);
  if (Math.abs(found.torque) <= LITTLE_TORQUE) return found;
  return kind === 'barrier' ? { ...found, kind: 'crossing' } : { ...found, converged: false };
}

/** Finds the angle at which the branches of both sides have the same energy. */
function* meeting(
  { fraction }: CurveExtremum,
  { left, right, width, meetsAtLeft }: Interval,
  holdAt: HoldAt,
): Calculation<StationaryPoint> {
  if (fraction === 0 && meetsAtLeft) return stationary('crossing', left);
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
